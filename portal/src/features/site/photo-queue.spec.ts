import { beforeEach, describe, expect, it, vi } from 'vitest';
import { Problem, offline } from '../../lib/problem.ts';
import { PhotoQueue, type QueuedPhoto, type SendPhoto } from './photo-queue.ts';

const files = (...names: string[]) => names.map((name) => new File(['picture'], name, { type: 'image/jpeg' }));
const states = (queue: PhotoQueue) => queue.snapshot().map(({ file, state }) => `${file.name} ${state}`);
const settle = () => new Promise((done) => setTimeout(done, 0));

/** A server that answers when the test says so. */
function server() {
  const open: { photo: QueuedPhoto; answer: (error?: Error) => void }[] = [];
  const send: SendPhoto = (photo, onProgress) => {
    onProgress(40);
    return new Promise((done, fail) => open.push({ photo, answer: (error) => (error ? fail(error) : done(undefined)) }));
  };
  return { open, send };
}

describe('the queue of photos', () => {
  beforeEach(() => {
    let made = 0;
    vi.stubGlobal('URL', Object.assign(URL, { createObjectURL: () => `blob:${(made += 1)}`, revokeObjectURL: vi.fn() }));
  });

  it('sends two at a time and tells how far each is', async () => {
    const { open, send } = server();
    const onSent = vi.fn();
    const queue = new PhotoQueue(send, onSent);
    queue.add(files('a', 'b', 'c'), 'm', 'Joists');
    expect(states(queue)).toEqual(['a sending', 'b sending', 'c waiting']);
    expect(queue.snapshot()[0]).toMatchObject({ percent: 40, note: 'Joists', milestoneId: 'm' });
    open[0]?.answer();
    await settle();
    expect(states(queue)).toEqual(['a sent', 'b sending', 'c sending']);
    expect([queue.unsent, onSent.mock.calls.length]).toEqual([2, 1]);
  });

  it('keeps a photo that could not be sent and sends the same one again', async () => {
    const { open, send } = server();
    const queue = new PhotoQueue(send);
    queue.add(files('a'), 'm', '');
    open[0]?.answer(offline());
    await settle();
    expect(queue.snapshot()[0]).toMatchObject({ state: 'failed', message: expect.stringContaining('No answer came') as unknown });
    queue.retry(queue.snapshot()[0]?.id ?? '');
    expect(open.map(({ photo }) => photo.id)).toEqual([open[0]?.photo.id, open[0]?.photo.id]);
    open[1]?.answer(new Problem('busy', 'Busy.', 503));
    await settle();
    queue.retryFailed();
    open[2]?.answer();
    await settle();
    expect(states(queue)).toEqual(['a sent']);
  });

  it('does not send again what the server will not take, and goes on with the next', async () => {
    const { open, send } = server();
    const queue = new PhotoQueue(send);
    queue.add(files('a', 'b', 'c'), 'm', '');
    open[0]?.answer(new Problem('wrong_file_kind', 'This is not a photo.', 415));
    await settle();
    expect(states(queue)).toEqual(['a refused', 'b sending', 'c sending']);
    queue.retryFailed();
    expect(states(queue)[0]).toBe('a refused');
    expect(queue.unsent).toBe(2);
    queue.drop(queue.snapshot()[0]?.id ?? '');
    expect(states(queue)).toEqual(['b sending', 'c sending']);
  });

  it('drops nothing that is on its way, and tells who listens', async () => {
    const { open, send } = server();
    const queue = new PhotoQueue(send);
    const listener = vi.fn();
    const stop = queue.subscribe(listener);
    queue.add(files('a'), 'm', '');
    queue.drop(queue.snapshot()[0]?.id ?? '');
    expect(states(queue)).toEqual(['a sending']);
    const before = listener.mock.calls.length;
    stop();
    open[0]?.answer();
    await settle();
    expect([before > 0, listener.mock.calls.length]).toEqual([true, before]);
  });
});
