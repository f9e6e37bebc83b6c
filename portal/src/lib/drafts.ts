const PREFIX = 'tally-draft:';
const PERSON = 'tally-person';

/** What somebody typed into a form, kept in this tab until it was sent, so that a reload or a new sign-in finds it again. */
export function readDraft<T>(name: string): Partial<T> | null {
  try {
    const text = sessionStorage.getItem(`${PREFIX}${name}`);
    return text === null ? null : (JSON.parse(text) as Partial<T>);
  } catch {
    return null;
  }
}

export function keepDraft(name: string, values: object): void {
  try {
    sessionStorage.setItem(`${PREFIX}${name}`, JSON.stringify(values));
  } catch {
    // the browser's room is full: the form goes on, only a reload would lose it
  }
}

export const dropDraft = (name: string): void => sessionStorage.removeItem(`${PREFIX}${name}`);

/** What one person typed is never shown to the next one in the same tab. Tells whether somebody else was here. */
export function keepOnlyFor(personId: string): boolean {
  const before = sessionStorage.getItem(PERSON);
  const another = before !== null && before !== personId;
  if (another) dropEverything();
  sessionStorage.setItem(PERSON, personId);
  return another;
}

/** At sign-out nothing stays behind. */
export function dropEverything(): void {
  sessionStorage.clear();
}
