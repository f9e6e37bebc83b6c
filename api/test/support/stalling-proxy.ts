import { connect, createServer, type AddressInfo, type Server, type Socket } from 'node:net';

/** A connection that can fall silent: bytes pass until a test says otherwise, and nobody is told that they no longer do. */
export class StallingProxy {
  private readonly sockets = new Set<Socket>();
  private server: Server | undefined;
  private silent = false;
  /** Words from the client, one after the other, at the last of which everything falls silent, before or after it was passed on. */
  private trap: { words: readonly string[]; when: 'before' | 'after' } | undefined;

  private constructor(
    private readonly host: string,
    private readonly port: number,
  ) {}

  /** Stands between a client and the server of an address; gives back the address to use instead. */
  static async before(address: string): Promise<{ proxy: StallingProxy; url: string }> {
    const url = new URL(address);
    const proxy = new StallingProxy(url.hostname, Number(url.port));
    url.port = String(await proxy.listen());
    return { proxy, url: url.href };
  }

  stallAt(words: readonly string[], when: 'before' | 'after'): void {
    this.trap = { words, when };
  }

  /** New connections work again; what is silent stays so. */
  recover(): void {
    this.silent = false;
    this.trap = undefined;
  }

  async close(): Promise<void> {
    for (const socket of this.sockets) socket.destroy();
    await new Promise((done) => this.server?.close(done));
  }

  private async listen(): Promise<number> {
    const server = createServer((client) => this.join(client));
    this.server = server;
    await new Promise<void>((done) => server.listen(0, '127.0.0.1', done));
    return (server.address() as AddressInfo).port;
  }

  private heard(chunk: Buffer): boolean {
    const [next, ...rest] = this.trap?.words ?? [];
    if (!this.trap || next === undefined || !chunk.includes(next)) return false;
    if (rest.length === 0) return true;
    this.trap = { ...this.trap, words: rest };
    return false;
  }

  private join(client: Socket): void {
    const behind = connect(this.port, this.host);
    const pair = { silent: false };
    for (const socket of [client, behind]) {
      this.sockets.add(socket);
      socket.on('error', () => undefined);
      socket.on('close', () => {
        // a half-open connection: the other side hears nothing of an end
        if (!pair.silent) (socket === client ? behind : client).destroy();
      });
    }
    client.on('data', (chunk: Buffer) => {
      const trapped = this.heard(chunk);
      if (trapped && this.trap?.when === 'after' && !pair.silent) behind.write(chunk);
      if (trapped) {
        this.silent = pair.silent = true;
        this.trap = undefined;
      }
      if (!pair.silent && !this.silent) behind.write(chunk);
      else pair.silent = true;
    });
    behind.on('data', (chunk: Buffer) => {
      if (!pair.silent) client.write(chunk);
    });
  }
}
