// Stops a PostgreSQL server when the process that started this one is gone, even by kill -9.
// node guardian.mjs <bin> <base> <durable> <holder>
import { existsSync } from 'node:fs';
import { Cluster } from './cluster.mjs';
import { withLock } from './lock.mjs';

const [, , bin = '', base = '', durable, holder = ''] = process.argv;
const cluster = new Cluster(bin, base, durable === 'true');

function leave() {
  if (!existsSync(base)) process.exit(0); // removed in the meantime, so nothing runs in it
  const stopping = withLock(cluster.lock, () => {
    if (cluster.letGo(holder)) cluster.stop('fast');
  });
  void stopping.finally(() => process.exit(0));
}

for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, () => {});
process.on('message', () => process.exit(0)); // the holder stopped in good order
process.on('disconnect', leave);
if (!process.connected) leave(); // it was gone before this one had loaded
