const MOST = 150;
// what some systems refuse in a name, control characters, and marks that turn the direction of reading
const UNWELCOME = /[:*?"<>|\p{Cc}\p{Cf}\p{Cs}]/gu;

/** A file's name as it is kept and offered for download: no folder, no control characters, not hidden, bounded; the ending stays. */
export function safeFileName(given: string): string {
  const base = given.normalize('NFC').split(/[\\/]/).at(-1) ?? '';
  const name = base.replace(UNWELCOME, '_').trim().replace(/^\.+/, '').replace(/[. ]+$/, '');
  if (name === '') return 'file';
  const letters = [...name];
  if (letters.length <= MOST) return name;
  const ending = /\.[^.]{1,8}$/.exec(name)?.[0] ?? '';
  return `${letters.slice(0, MOST - ending.length).join('')}${ending}`;
}
