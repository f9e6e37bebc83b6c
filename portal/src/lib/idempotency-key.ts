import { useState } from 'react';
import { v4 } from 'uuid';

const PREFIX = 'tally-key:';

export interface IdempotencyKey {
  key: string;
  /** The act was answered: the next one gets a key of its own. */
  spend: () => void;
}

/**
 * The key of an act, made when its form opens and kept until the server has answered, so that a reload or a second click sends the
 * same one. `scope` names form and record.
 */
export function useIdempotencyKey(scope: string): IdempotencyKey {
  const name = `${PREFIX}${scope}`;
  const [key, setKey] = useState(() => stored(name));
  const spend = () => {
    sessionStorage.removeItem(name);
    setKey(stored(name));
  };
  return { key, spend };
}

function stored(name: string): string {
  const before = sessionStorage.getItem(name);
  if (before) return before;
  const key = v4();
  sessionStorage.setItem(name, key);
  return key;
}
