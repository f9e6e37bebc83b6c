// `npm run reset`: removes the local data after asking; stops nothing that it did not start.
import { existsSync, readdirSync, rmSync } from 'node:fs';
import path from 'node:path';
import { createInterface } from 'node:readline/promises';
import { root } from './lib/children.mjs';
import { Cluster, clusterFolder, holderLives } from './lib/cluster.mjs';
import { explain, Failure } from './lib/failure.mjs';
import { refuseWhileRunning } from './lib/house.mjs';
import { pause } from './lib/processes.mjs';

const data = path.join(root, '.data');

try {
  refuseWhileRunning(path.join(data, 'launcher.lock'));
  const clusters = ['postgres', 'test-pg'].map((name) => clusterFolder(path.join(data, name))).filter((folder) => existsSync(folder));
  if (!existsSync(data) && clusters.length === 0) {
    console.log('There is nothing to remove.');
  } else {
    for (const folder of clusters) await refuseWhileServing(folder);
    if (await confirmed()) {
      for (const folder of [...clusters, data]) rmSync(folder, { recursive: true, force: true });
      console.log('Removed. npm start begins with a fresh demo.');
    } else {
      console.log('Nothing was removed.');
    }
  }
} catch (error) {
  console.error(explain(error));
  process.exitCode = 1;
}

/**
 * A server whose starter was just killed stops by itself within moments; any other one belongs to somebody.
 * @param {string} folder
 */
async function refuseWhileServing(folder) {
  const cluster = new Cluster('', folder, true);
  for (let tries = 0; cluster.postmaster() && tries < 50; tries += 1) {
    if (existsSync(cluster.holders) && readdirSync(cluster.holders).some(holderLives)) break;
    await pause(100);
  }
  const server = cluster.postmaster();
  if (server && cluster.isPostmaster(server.pid)) throw new Failure(`A database server (process ${server.pid}) still uses ${folder}. Wait for the tests to end, or stop it.`);
}

async function confirmed() {
  if (process.argv.includes('--yes')) return true;
  if (!process.stdin.isTTY) throw new Failure('This removes the database, files, mails and secrets in .data. Say so with: npm run reset -- --yes');
  const ask = createInterface({ input: process.stdin, output: process.stdout });
  const answer = await ask.question('Remove the database, files, mails and secrets in .data? [y/N] ');
  ask.close();
  return /^y(es)?$/i.test(answer.trim());
}
