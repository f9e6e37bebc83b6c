import { Injectable } from '@nestjs/common';
import type { Request, Response } from 'express';
import multer from 'multer';
import { MOST_LOGO_BYTES, type FirmSettings } from '@tallypole/shared/schemas/firms';
import { requireInFirm } from '../common/access.ts';
import { Clock } from '../common/clock.ts';
import { CommandRunner, type Answered } from '../common/command-runner.ts';
import { Problem } from '../common/problem.ts';
import { UnitOfWork, type Actor } from '../common/unit-of-work.ts';
import { sniff } from '../files/media-kind.ts';
import { asUploadProblem } from '../files/upload-problem.ts';
import { QueueRepository } from '../queue/queue.repository.ts';
import { FirmSettingsRepository } from './firm-settings.repository.ts';
import { FirmSettingsService } from './firm-settings.service.ts';

const KINDS = ['image/png', 'image/jpeg'];

/** The firm's sign on its papers. What was sent is kept until the worker has made the picture of it, and then forgotten. */
@Injectable()
export class LogoService {
  constructor(
    private readonly commands: CommandRunner,
    private readonly work: UnitOfWork,
    private readonly settings: FirmSettingsService,
    private readonly repository: FirmSettingsRepository,
    private readonly queue: QueueRepository,
    private readonly clock: Clock,
  ) {}

  /** Sent again it is the same logo, so it needs no key. */
  async set(actor: Actor, firmId: string, request: Request, response: Response): Promise<FirmSettings> {
    // nobody's file is read who may not send one
    await this.work.read(actor, (tx) => requireInFirm(tx, 'firm.settings', firmId));
    const sent = await receive(request, response);
    const kind = await sniff(sent);
    if (!kind || !KINDS.includes(kind)) throw new Problem('wrong_file_kind', { detail: 'This is not a PNG or JPEG picture.' });
    return await this.work.write(actor, async (tx) => {
      await requireInFirm(tx, 'firm.settings', firmId);
      await this.repository.keepLogo(tx, firmId, sent, this.clock.now());
      await this.queue.enqueue(tx, 'render_logo', { firmId }, { key: `logo:${firmId}` });
      return await this.settings.found(tx, firmId);
    });
  }

  remove(actor: Actor, firmId: string, key: string): Promise<Answered<FirmSettings>> {
    return this.commands.run<FirmSettings>(actor, {
      operation: 'firm.logo_remove',
      key,
      input: { firmId },
      authorize: (tx) => requireInFirm(tx, 'firm.settings', firmId),
      act: async (tx) => {
        await this.repository.removeLogo(tx, firmId);
        return await this.settings.found(tx, firmId);
      },
    });
  }

  picture(actor: Actor, firmId: string): Promise<Buffer> {
    return this.work.read(actor, async (tx) => {
      await requireInFirm(tx, 'firm.settings', firmId);
      const logo = await this.repository.logo(tx, firmId);
      if (!logo) throw new Problem('not_found');
      return logo;
    });
  }
}

/** One small file, in memory: it goes into the database. */
async function receive(request: Request, response: Response): Promise<Buffer> {
  const upload = multer({ storage: multer.memoryStorage(), limits: { files: 1, fields: 2, parts: 4, fileSize: MOST_LOGO_BYTES, fieldSize: 1_000, headerPairs: 30 } }).single('file');
  await new Promise<void>((done, fail) => {
    void upload(request, response, (error: unknown) => (error ? fail(asUploadProblem(error, MOST_LOGO_BYTES)) : done()));
  });
  const file = (request as Request & { file?: { buffer: Buffer } }).file;
  if (!file || file.buffer.length === 0) throw Problem.field('/file', 'Choose a file.', 'missing');
  return file.buffer;
}
