import { useReducer } from 'react';
import { v4, v7 } from 'uuid';

const KEY = 'tally-key:';
const ID = 'tally-id:';

export interface IdempotencyKey {
  key: string;
  /** The act was answered: the next one gets a key of its own, and what it creates an id of its own. */
  spend: () => void;
  /** The key stands for something else already; the record that the form creates stays the same one. */
  renew: () => void;
}

/**
 * The key of an act, made when its form opens and kept until the server has answered, so that a reload or a second click sends the
 * same one. `scope` names form and record.
 */
export function useIdempotencyKey(scope: string): IdempotencyKey {
  const [, look] = useReducer((times: number) => times + 1, 0);
  const renew = () => {
    sessionStorage.removeItem(`${KEY}${scope}`);
    look();
  };
  const spend = () => {
    sessionStorage.removeItem(`${ID}${scope}`);
    renew();
  };
  return { key: stored(`${KEY}${scope}`, v4), spend, renew };
}

/**
 * An id that this browser makes for a new record. It lives as long as the key of the same scope, so that whatever is sent again, after
 * a reload too, creates the same thing.
 */
export const useNewId = (scope: string): string => stored(`${ID}${scope}`, v7);

function stored(name: string, make: () => string): string {
  const before = sessionStorage.getItem(name);
  if (before) return before;
  const made = make();
  sessionStorage.setItem(name, made);
  return made;
}
