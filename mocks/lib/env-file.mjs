import { existsSync, readFileSync } from 'node:fs';
import { Failure } from './failure.mjs';

/**
 * Reads NAME=value lines. Comments and empty lines are skipped; a value may stand in single or double quotes, and
 * outside quotes ` #` begins a comment.
 * @param {string} text
 * @param {string} [name] of the file, for messages
 * @returns {Record<string, { value: string, line: number }>}
 */
export function parseEnv(text, name = '.env') {
  /** @type {Record<string, { value: string, line: number }>} */
  const found = {};
  text.replace(/^\uFEFF/, '').split(/\r?\n/).forEach((raw, i) => {
    const line = raw.trim();
    if (line === '' || line.startsWith('#')) return;
    const where = `${name}, line ${i + 1}`;
    const parts = /^(?:export\s+)?([A-Za-z_][A-Za-z0-9_]*)\s*=\s*(.*)$/.exec(line);
    if (!parts) throw new Failure(`${where} is not of the form NAME=value.`);
    const [, variable = '', rest = ''] = parts;
    const earlier = found[variable];
    if (earlier) throw new Failure(`${where}: ${variable} is already set on line ${earlier.line}.`);
    found[variable] = { value: unquote(rest, where), line: i + 1 };
  });
  return found;
}

/**
 * @param {string} rest
 * @param {string} where
 */
function unquote(rest, where) {
  const quote = rest[0];
  if (quote !== '"' && quote !== "'") return rest.replace(/(^|\s)#.*$/, '').trim();
  const end = rest.indexOf(quote, 1);
  if (end < 0) throw new Failure(`${where}: the quote ${quote} is not closed.`);
  if (!/^\s*(#.*)?$/.test(rest.slice(end + 1))) throw new Failure(`${where}: something follows the closing quote.`);
  return rest.slice(1, end);
}

/** @param {string} file */
export const readEnvFile = (file) => (existsSync(file) ? parseEnv(readFileSync(file, 'utf8')) : {});
