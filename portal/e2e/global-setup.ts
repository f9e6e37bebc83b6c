import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import path from 'node:path';
import setUpApi from '../../api/test/global-setup.mjs';
import tearDownApi from '../../api/test/global-teardown.mjs';

const portal = fileURLToPath(new URL('..', import.meta.url));

/** Builds server and portal (as in production, whatever the test runner says), migrates a template database; the scenarios start their own processes on it. */
export async function setup(): Promise<void> {
  const done = spawnSync(process.execPath, [path.join(portal, '../node_modules/vite/bin/vite.js'), 'build', '--logLevel', 'warn'], { cwd: portal, encoding: 'utf8', env: { ...process.env, NODE_ENV: 'production' } });
  if (done.status !== 0) throw new Error(`${done.stdout}${done.stderr}`);
  await setUpApi();
}

export async function teardown(): Promise<void> {
  await tearDownApi();
}
