const PREFIX = 'tally-draft:';

/** What somebody typed into a form, kept in this tab until it was sent, so that a reload or a new sign-in finds it again. */
export function readDraft<T>(name: string): Partial<T> | null {
  try {
    const text = sessionStorage.getItem(`${PREFIX}${name}`);
    return text === null ? null : (JSON.parse(text) as Partial<T>);
  } catch {
    return null;
  }
}

export const keepDraft = (name: string, values: object): void => sessionStorage.setItem(`${PREFIX}${name}`, JSON.stringify(values));
export const dropDraft = (name: string): void => sessionStorage.removeItem(`${PREFIX}${name}`);

/** At sign-out nothing stays behind. */
export function dropEverything(): void {
  sessionStorage.clear();
}
