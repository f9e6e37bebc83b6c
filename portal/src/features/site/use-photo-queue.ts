import { useEffect, useSyncExternalStore } from 'react';
import { queryClient } from '../../lib/query-client.ts';
import { sendPhoto } from './api/send-photo.ts';
import { PhotoQueue } from './photo-queue.ts';
import { strings } from './strings.ts';

const queues = new Map<string, PhotoQueue>();

/** The job's queue; one for all its pages, so that what is on its way goes on when the page changes. */
function queueOf(jobId: string): PhotoQueue {
  const before = queues.get(jobId);
  if (before) return before;
  const queue = new PhotoQueue(sendPhoto(jobId), () => void queryClient.invalidateQueries({ queryKey: ['jobs', jobId] }));
  window.addEventListener('online', () => queue.retryFailed());
  window.addEventListener('beforeunload', (event) => {
    if (queue.unsent === 0) return;
    event.preventDefault();
    // what older browsers ask for
    event.returnValue = strings.leave;
  });
  queues.set(jobId, queue);
  return queue;
}

export function usePhotoQueue(jobId: string) {
  const queue = queueOf(jobId);
  const photos = useSyncExternalStore(queue.subscribe, queue.snapshot);
  useEffect(() => {
    const again = () => document.visibilityState === 'visible' && queue.retryFailed();
    document.addEventListener('visibilitychange', again);
    return () => document.removeEventListener('visibilitychange', again);
  }, [queue]);
  return { queue, photos };
}
