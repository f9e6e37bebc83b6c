// Loaded before a worker with --import: notes in COUNT_FILE how many statements each transaction had that ran COUNT_SQL, besides BEGIN and
// COMMIT. The product knows nothing of it.
import { appendFileSync } from 'node:fs';
import pg from 'pg';

const { COUNT_SQL = '', COUNT_FILE = '' } = process.env;
const query = pg.Client.prototype.query;

pg.Client.prototype.query = function (...args) {
  const text = typeof args[0] === 'string' ? args[0] : (args[0]?.text ?? '');
  if (/^(START TRANSACTION|BEGIN)/.test(text)) Object.assign(this, { counted: 0, wanted: false });
  else if (/^COMMIT/.test(text)) {
    if (this.wanted) appendFileSync(COUNT_FILE, `${this.counted}\n`);
  } else {
    this.counted += 1;
    if (text.includes(COUNT_SQL)) this.wanted = true;
  }
  return query.apply(this, args);
};
