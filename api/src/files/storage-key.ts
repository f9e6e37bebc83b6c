import { v7 } from 'uuid';

/** A new key for something of a job; nothing in it comes from outside. */
export const newStorageKey = (firmId: string, jobId: string, now: Date): string => `${firmId}/${jobId}/${now.getUTCFullYear()}/${v7()}`;
