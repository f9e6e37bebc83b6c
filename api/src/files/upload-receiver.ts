import { Inject, Injectable } from '@nestjs/common';
import type { Request, Response } from 'express';
import multer, { type StorageEngine } from 'multer';
import { pipeline } from 'node:stream';
import type { Answered } from '../common/command-runner.ts';
import { Clock } from '../common/clock.ts';
import { Problem } from '../common/problem.ts';
import { safeFileName } from './file-name.ts';
import { FILE_STORAGE, type FileStorage } from './file-storage.ts';
import { sniff } from './media-kind.ts';
import { newStorageKey } from './storage-key.ts';
import { UploadMeter } from './upload-meter.ts';
import { asUploadProblem } from './upload-problem.ts';

export interface Received {
  /** The text fields of the form. */
  fields: Record<string, unknown>;
  name: string;
  bytes: number;
  sha256: string;
  /** What the content shows itself to be, whatever the sender called it. */
  mediaType: string | undefined;
  storageKey: string;
}

interface Kept {
  meter: UploadMeter;
}

const FIELD_LIMITS = { files: 1, fields: 10, parts: 12, fieldSize: 4_000, fieldNameSize: 60, headerPairs: 30 };

/** Takes one file of a multipart request straight into the storage, never whole into memory. */
@Injectable()
export class UploadReceiver {
  constructor(
    @Inject(FILE_STORAGE) private readonly storage: FileStorage,
    private readonly clock: Clock,
  ) {}

  /**
   * Receives the field `file`, then lets `act` write what belongs to it. What `act` refuses, or had answered before, is forgotten; after
   * an error whose outcome is unknown the bytes stay, since a row may point at them.
   */
  async take<T>(request: Request, response: Response, place: { firmId: string; jobId: string; mostBytes: number }, act: (received: Received) => Promise<Answered<T>>): Promise<Answered<T>> {
    const storageKey = newStorageKey(place.firmId, place.jobId, this.clock.now());
    const received = await this.receive(request, response, storageKey, place.mostBytes);
    try {
      const answered = await act(received);
      if (answered.replayed) await this.storage.remove(storageKey);
      return answered;
    } catch (error) {
      // what can't be forgotten now stays behind unseen; the sender hears what was wrong with the form
      if (error instanceof Problem && error.code !== 'unclear') await this.storage.remove(storageKey).catch(() => undefined);
      throw error;
    }
  }

  private async receive(request: Request, response: Response, storageKey: string, mostBytes: number): Promise<Received> {
    const upload = multer({ storage: intoStorage(this.storage, storageKey), limits: { ...FIELD_LIMITS, fileSize: mostBytes }, defParamCharset: 'utf8' }).single('file');
    await new Promise<void>((done, fail) => {
      void upload(request, response, (error: unknown) => (error ? fail(asUploadProblem(error, mostBytes)) : done()));
    });
    const file = request.file as (Express.Multer.File & Kept) | undefined;
    if (!file) throw Problem.field('/file', 'Choose a file.', 'missing');
    const { meter } = file;
    if (meter.bytes === 0) {
      await this.storage.remove(storageKey);
      throw new Problem('unreadable_file', { detail: 'The file is empty.' });
    }
    return {
      fields: { ...(request.body as Record<string, unknown>) },
      name: safeFileName(file.originalname),
      bytes: meter.bytes,
      sha256: meter.sha256(),
      mediaType: await sniff(meter.head),
      storageKey,
    };
  }
}

/** multer's way into a storage; what multer gives up half way is removed again. */
function intoStorage(storage: FileStorage, key: string): StorageEngine {
  return {
    _handleFile(_request, file, done) {
      const meter = new UploadMeter();
      pipeline(file.stream, meter, () => undefined);
      storage.put(key, meter).then(
        () => done(null, { meter } as Partial<Express.Multer.File> & Kept),
        (error: unknown) => done(error),
      );
    },
    _removeFile(_request, _file, done) {
      storage.remove(key).then(() => done(null), done);
    },
  };
}
