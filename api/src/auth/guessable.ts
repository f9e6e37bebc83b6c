/** Whose password it is: nothing of that makes it any harder to guess. */
export interface About {
  name: string | null;
  email: string;
}

const FEW_CHARACTERS = 5;
/** As much has to be left without the words that anybody would try first. */
const REST = 6;
const ROWS = ['01234567890123456789', 'abcdefghijklmnopqrstuvwxyz', 'qwertyuiop', 'asdfghjkl', 'zxcvbnm', 'qwertyuiopasdfghjklzxcvbnm', '1qaz2wsx3edc4rfv5tgb6yhn7ujm', 'tallypole'];
const RUNS = ROWS.flatMap((row) => [row, [...row].reverse().join('')]).map((row) => row.repeat(3));
const RUN = 4;

/** Common passwords from published leaks, all in lower case (a package's list); loaded when the first password is set. */
let list: Promise<ReadonlySet<string>> | undefined;
const commonPasswords = (): Promise<ReadonlySet<string>> => (list ??= import('@zxcvbn-ts/language-common').then(({ dictionary }) => new Set(dictionary['passwords-common'] as readonly string[])));

/** Why a password is easy to guess, as a sentence; null where it isn't. */
export async function guessable(password: string, about: About): Promise<string | null> {
  const lower = password.toLowerCase();
  const common = await commonPasswords();
  if (common.has(lower) || common.has(core(lower)) || common.has(core(unleet(lower)))) return 'This is one of the first passwords that anybody would try. Choose another one.';
  if (new Set(lower).size < FEW_CHARACTERS || isRepeated(lower, common) || withoutRuns(lower).length < REST) return 'This repeats itself or runs along the keyboard. Choose another one.';
  if (without(lower, wordsAbout(about)).length < REST) return 'This is little more than your name or address. Choose another one.';
  return null;
}

/** What is left without digits and signs around a word: "Password1234!" is "password". */
const core = (text: string): string => text.replace(/^[^a-z]+|[^a-z]+$/g, '');
const LEET: Readonly<Record<string, string>> = { '0': 'o', '1': 'i', '3': 'e', '4': 'a', '5': 's', '7': 't', '@': 'a', $: 's', '!': 'i' };
const unleet = (text: string): string => core(text).replace(/[013457@$!]/g, (sign) => LEET[sign] ?? sign);

/** One piece over and over, where the piece is short or itself a common password. */
function isRepeated(text: string, common: ReadonlySet<string>): boolean {
  const piece = /^(.+?)\1+$/su.exec(text)?.[1];
  return piece !== undefined && (piece.length < REST || common.has(core(piece)) || withoutRuns(piece).length < REST);
}

/** Without stretches that run along the alphabet, the digits or the keyboard. */
function withoutRuns(text: string): string {
  let rest = '';
  for (let at = 0; at < text.length; ) {
    let length = 0;
    for (let end = at + RUN; end <= text.length && RUNS.some((run) => run.includes(text.slice(at, end))); end += 1) length = end - at;
    if (length === 0) rest += text[at] ?? '';
    at += Math.max(1, length);
  }
  return rest;
}

const wordsAbout = ({ name, email }: About): string[] => `${name ?? ''} ${email}`.toLowerCase().split(/[^\p{L}\p{N}]+/u).filter((word) => word.length >= 3);

const without = (text: string, words: readonly string[]): string =>
  // the longest first: "halvorsen" before "hal"
  [...words].sort((a, b) => b.length - a.length).reduce((rest, word) => rest.replaceAll(word, ''), text).replace(/[\s\p{P}]/gu, '');
