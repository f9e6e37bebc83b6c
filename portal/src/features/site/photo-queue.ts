import { v7 } from 'uuid';
import { Problem } from '../../lib/problem.ts';
import { mayHelpToRetry } from '../../lib/upload.ts';

type QueuedState = 'waiting' | 'sending' | 'sent' | 'failed' | 'refused';

export interface QueuedPhoto {
  /** Made here, once: however often it is sent, it stays the same photo. */
  id: string;
  milestoneId: string;
  note: string;
  file: File;
  preview: string;
  state: QueuedState;
  /** 0 to 100 of the bytes that have left. */
  percent: number;
  message: string | null;
}

export type SendPhoto = (photo: QueuedPhoto, onProgress: (percent: number) => void) => Promise<unknown>;

const AT_ONCE = 2;

/** Photos on their way to the server, two at a time. It outlives the page, so that one can go on walking through the house. */
export class PhotoQueue {
  private photos: readonly QueuedPhoto[] = [];
  private readonly listeners = new Set<() => void>();

  constructor(
    private readonly send: SendPhoto,
    private readonly onSent: () => void = () => undefined,
  ) {}

  readonly subscribe = (listener: () => void): (() => void) => {
    this.listeners.add(listener);
    return () => this.listeners.delete(listener);
  };

  readonly snapshot = (): readonly QueuedPhoto[] => this.photos;

  get unsent(): number {
    return this.photos.filter(({ state }) => state === 'waiting' || state === 'sending' || state === 'failed').length;
  }

  add(files: readonly File[], milestoneId: string, note: string): void {
    const added = files.map((file): QueuedPhoto => ({ id: v7(), milestoneId, note, file, preview: URL.createObjectURL(file), state: 'waiting', percent: 0, message: null }));
    this.set([...this.photos, ...added]);
    this.pump();
  }

  retry(id: string): void {
    this.change(id, { state: 'waiting', percent: 0, message: null });
    this.pump();
  }

  /** When the network is back: what failed for lack of it goes again. */
  retryFailed(): void {
    for (const { id, state } of this.photos) if (state === 'failed') this.change(id, { state: 'waiting', percent: 0, message: null });
    this.pump();
  }

  drop(id: string): void {
    const photo = this.photos.find((queued) => queued.id === id);
    if (!photo || photo.state === 'sending') return;
    URL.revokeObjectURL(photo.preview);
    this.set(this.photos.filter((queued) => queued.id !== id));
  }

  private pump(): void {
    const free = AT_ONCE - this.photos.filter(({ state }) => state === 'sending').length;
    for (const photo of this.photos.filter(({ state }) => state === 'waiting').slice(0, free)) void this.perform(photo);
  }

  private async perform(photo: QueuedPhoto): Promise<void> {
    this.change(photo.id, { state: 'sending' });
    try {
      await this.send(photo, (percent) => this.change(photo.id, { percent }));
      this.change(photo.id, { state: 'sent', percent: 100 });
      this.onSent();
    } catch (error) {
      const problem = error instanceof Problem ? error : new Problem('failed', 'Sorry, something went wrong. The photo is kept here.', 500);
      this.change(photo.id, { state: mayHelpToRetry(problem) ? 'failed' : 'refused', message: problem.errors[0]?.message ?? problem.message });
    }
    this.pump();
  }

  private change(id: string, change: Partial<QueuedPhoto>): void {
    this.set(this.photos.map((photo) => (photo.id === id ? { ...photo, ...change } : photo)));
  }

  private set(photos: readonly QueuedPhoto[]): void {
    this.photos = photos;
    for (const listener of this.listeners) listener();
  }
}
