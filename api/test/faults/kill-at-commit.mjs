// Loaded before the server with --import: kills this process just before or after the commit of the named operation (KILL_OPERATION,
// KILL_WHEN). The product knows nothing of it.
import pg from 'pg';

const { KILL_OPERATION, KILL_WHEN } = process.env;
const query = pg.Client.prototype.query;

const die = () => {
  process.kill(process.pid, 'SIGKILL');
  for (;;);
};

pg.Client.prototype.query = function (...args) {
  const text = typeof args[0] === 'string' ? args[0] : args[0]?.text;
  const values = Array.isArray(args[1]) ? args[1] : args[0]?.values;
  if (/^select app\.answer/.test(text) && values?.includes(KILL_OPERATION)) this.doomed = true;
  if (!this.doomed || !/^COMMIT/.test(text)) return query.apply(this, args);
  if (KILL_WHEN === 'before') die();
  const callback = args.at(-1);
  if (typeof callback === 'function') {
    args[args.length - 1] = () => die();
    return query.apply(this, args);
  }
  return query.apply(this, args).then(die);
};
