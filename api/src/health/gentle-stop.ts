import { Injectable, type BeforeApplicationShutdown } from '@nestjs/common';
import { HttpAdapterHost } from '@nestjs/core';
import type { Server, ServerResponse } from 'node:http';

/** Longer than any statement may take. */
const MOST_MS = 15_000;
const LOOK_MS = 50;

/** When the process is asked to stop: no new connections, running requests are finished and answered, then the rest shuts down. */
@Injectable()
export class GentleStop implements BeforeApplicationShutdown {
  constructor(private readonly host: HttpAdapterHost) {}

  async beforeApplicationShutdown(): Promise<void> {
    const server = this.host.httpAdapter.getHttpServer() as Server;
    if (!server.listening) return;
    // a kept connection ends with the answer to what still comes over it
    server.prependListener('request', (_request, response: ServerResponse) => response.setHeader('Connection', 'close'));
    const closed = new Promise((done) => server.close(done));
    const idle = setInterval(() => server.closeIdleConnections(), LOOK_MS);
    const late = setTimeout(() => server.closeAllConnections(), MOST_MS);
    await closed;
    clearInterval(idle);
    clearTimeout(late);
  }
}
