import { describe, expect, it } from '@jest/globals';
import { existsSync, readFileSync } from 'node:fs';
import path from 'node:path';

const api = path.join(import.meta.dirname, '..');
const rows = readFileSync(path.join(api, 'ASVS.md'), 'utf8')
  .split('\n')
  .filter((line) => line.startsWith('| V'))
  .map((line) => {
    const [, id = '', level = '', requirement = '', proof = ''] = line.split(' | ').flatMap((cell, i) => (i === 0 ? ['', cell.slice(2)] : [cell.replace(/ \|$/, '')]));
    return { id, level, requirement, proof };
  });

/** A file, and the words of a test's title after it. */
const CITED = /`((?:\.\.\/|src\/|test\/)[^`]+\.(?:tsx?|js))`(?: “([^”]+)”)?/g;

describe('the table of security requirements', () => {
  it('names each requirement once, with its level', () => {
    expect(rows.length).toBeGreaterThan(60);
    expect(rows.filter(({ id, level, requirement }) => !/^V\d+\.\d+\.\d+([–,] ?V?\d+\.\d+\.\d+)*$/.test(id) || !/^[123](–[123])?$/.test(level) || requirement === '').map(({ id }) => id)).toEqual([]);
    const ids = rows.flatMap(({ id }) => id.split(', '));
    expect(ids.filter((id, i) => ids.indexOf(id) !== i)).toEqual([]);
  });

  it('has for each a proof, a deviation or the word that it is not met yet', () => {
    const bare = rows.filter(({ proof }) => [...proof.matchAll(CITED)].length === 0 && !/\*(Deviation|Not met yet)\*|^nothing is searched/.test(proof));
    expect(bare.map(({ id }) => id)).toEqual([]);
  });

  it('cites files and tests that exist', () => {
    const cited = rows.flatMap(({ id, proof }) => [...proof.matchAll(CITED)].map(([, file = '', title]) => ({ id, file, title })));
    const wrong = cited.filter(({ file, title }) => {
      const at = path.join(api, file);
      return !existsSync(at) || (title !== undefined && !readFileSync(at, 'utf8').includes(title));
    });
    expect(wrong).toEqual([]);
    // quotes that follow no file would be checked by nobody
    const quoted = rows.flatMap(({ proof }) => [...proof.matchAll(/“[^”]+”/g)]).length;
    expect(cited.filter(({ title }) => title !== undefined)).toHaveLength(quoted);
  });
});
