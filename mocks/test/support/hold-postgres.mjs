// Starts the PostgreSQL of a folder, says so, and stops when told to. A process of its own, for tests of who stops what.
import { startPostgres } from '../../postgres.mjs';

const pg = await startPostgres({ dir: process.argv[2] ?? '', durable: false });
process.on('message', () => {
  void pg.stop().then((stopped) => process.send?.({ stopped }, () => process.exit(0)));
});
process.send?.({ port: pg.port, reused: pg.reused, base: pg.base });
