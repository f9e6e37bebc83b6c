// Loaded before a server or worker with --import: kills this process just before or after the commit of the first transaction that runs a
// statement containing KILL_SQL (KILL_WHEN: before, after). The product knows nothing of it.
import pg from 'pg';

const { KILL_SQL = '', KILL_WHEN } = process.env;
const query = pg.Client.prototype.query;

const die = () => {
  process.kill(process.pid, 'SIGKILL');
  for (;;);
};

pg.Client.prototype.query = function (...args) {
  const text = typeof args[0] === 'string' ? args[0] : (args[0]?.text ?? '');
  if (text.includes(KILL_SQL)) this.doomed = true;
  if (!this.doomed || !/^COMMIT/.test(text)) return query.apply(this, args);
  if (KILL_WHEN === 'before') die();
  const callback = args.at(-1);
  if (typeof callback === 'function') {
    args[args.length - 1] = () => die();
    return query.apply(this, args);
  }
  return query.apply(this, args).then(die);
};
