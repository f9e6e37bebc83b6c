import { existsSync, mkdirSync, watch } from 'node:fs';
import path from 'node:path';
import { tsc, vite } from './build.mjs';
import { root } from './children.mjs';
import { explain } from './failure.mjs';

/**
 * `npm run dev`: compiles on change, restarts web and worker after the compiler has written, migrates when a migration
 * changed, and serves the portal from Vite.
 * @param {import('./house.mjs').House} house
 * @param {{ ports: ReturnType<import('./settings.mjs').portsOf>, start: () => void, migrate: () => Promise<void> }} options
 */
export async function watchSources(house, { ports, start, migrate }) {
  house.service('compiler', [tsc, '-b', '--watch', '--preserveWatchOutput', 'api/tsconfig.build.json']);
  const dev = String(ports.dev?.port);
  const api = `http://127.0.0.1:${ports.web.port}`;
  house.service('development server', [vite, '--host', '127.0.0.1', '--port', dev, '--strictPort', '--clearScreen', 'false', '--logLevel', 'warn'], {
    cwd: path.join(root, 'portal'),
    env: { API_URL: api },
  });
  restartOnChange(house, start, migrate);
}

/**
 * @param {import('./house.mjs').House} house
 * @param {() => void} start
 * @param {() => Promise<void>} migrate
 */
function restartOnChange(house, start, migrate) {
  let migrations = false;
  /** @type {NodeJS.Timeout | undefined} */
  let timer;
  let work = Promise.resolve();
  const restart = async () => {
    if (house.stopping) return;
    await Promise.all([house.endService('web server'), house.endService('worker')]);
    if (migrations) {
      migrations = false;
      await migrate().catch((error) => console.error(explain(error)));
    }
    if (house.stopping) return;
    start();
    house.say('web server and worker restarted');
  };
  for (const folder of ['api/dist', 'shared/dist', 'api/src/notices/templates'].map((name) => path.join(root, name))) {
    if (!existsSync(folder)) mkdirSync(folder, { recursive: true });
    watch(folder, { recursive: true }, (_event, file) => {
      if (!file || !/\.(js|hbs)$/.test(file)) return;
      if (/(^|\/)migrations\//.test(file)) migrations = true;
      clearTimeout(timer); // the compiler writes many files in a row
      timer = setTimeout(() => (work = work.then(restart)), 400);
    });
  }
}
