import { describe, expect, it } from '@jest/globals';
import { Problem } from './problem.ts';
import { safeError } from './logging.ts';

const typed = 'ann@people.example';

describe('an error in the log', () => {
  it.each(['22P02', '22003', '23514', '23505'])('says nothing of what was typed when the database refused it (%s)', (code) => {
    const parent = Object.assign(new Error(`invalid input: "${typed}"`), { code, constraint: 'person_email_key', detail: `Key (email)=(${typed})` });
    const told = safeError(Object.assign(new Error(parent.message), { name: 'SequelizeDatabaseError', parent, sql: `select '${typed}'`, parameters: [typed] }));
    expect(told).toMatchObject({ type: 'SequelizeDatabaseError', state: code, constraint: 'person_email_key', stack: expect.stringMatching(/^ +at /) as unknown });
    expect(JSON.stringify(told)).not.toContain(typed);
  });

  it('says nothing of what a problem tells its reader, and names its cause', () => {
    const problem = Object.assign(new Problem('busy', { detail: `No room for ${typed}.` }), { cause: Object.assign(new Error(typed), { code: 'ECONNREFUSED' }) });
    const told = safeError(problem);
    expect(told).toMatchObject({ type: 'Problem', state: 'busy', cause: 'ECONNREFUSED' });
    expect(JSON.stringify(told)).not.toContain(typed);
  });

  it('keeps the message of what nobody foresaw, since that has to be found', () => {
    expect(safeError(new TypeError('x is not a function'))).toMatchObject({ type: 'TypeError', message: 'x is not a function' });
  });
});
