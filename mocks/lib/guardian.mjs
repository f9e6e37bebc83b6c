// Stops a PostgreSQL server when the process that started this one is gone, even by kill -9.
// node guardian.mjs <bin> <base> <durable> <holder>
import { Cluster } from './cluster.mjs';
import { withLock } from './lock.mjs';

const [, , bin = '', base = '', durable, holder = ''] = process.argv;
const cluster = new Cluster(bin, base, durable === 'true');
for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, () => {});
process.on('message', () => process.exit(0)); // the holder stopped in good order
process.on('disconnect', () => {
  void withLock(cluster.lock, () => {
    if (cluster.letGo(holder)) cluster.stop('fast');
  }).finally(() => process.exit(0));
});
