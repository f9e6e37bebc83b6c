import { v7 } from 'uuid';

const KEY = /^[0-9a-f-]{36}\/[0-9a-f-]{36}\/\d{4}\/[0-9a-f-]{36}$/;

/** A new key for something of a job; nothing in it comes from outside. */
export const newStorageKey = (firmId: string, jobId: string, now: Date): string => `${firmId}/${jobId}/${now.getUTCFullYear()}/${v7()}`;

/** The key as it is, if it has the form of one: it becomes a path. */
export function checkedKey(key: string): string {
  if (!KEY.test(key)) throw new Error('This is no storage key.');
  return key;
}
