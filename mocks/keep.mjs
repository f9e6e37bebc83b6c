// `npm run backup -- --to <folder>`, `npm run restore -- --from <folder>` and `npm run check` for the house that `npm start` runs here.
// A deployment without the launcher runs api/dist/operation/<command>.js itself.
import { mkdirSync } from 'node:fs';
import path from 'node:path';
import { build } from './lib/build.mjs';
import { root, runNode } from './lib/children.mjs';
import { readEnvFile } from './lib/env-file.mjs';
import { House } from './lib/house.mjs';
import { requireNode, requirePackages } from './lib/packages.mjs';
import { isFree } from './lib/ports.mjs';
import { portsOf, readSettings } from './lib/settings.mjs';
import { startStandIns, storageStandIn } from './lib/stand-ins.mjs';
import { startPostgres } from './postgres.mjs';

const data = path.join(root, '.data');
const house = new House();
const [command = '', ...args] = process.argv.slice(2);

try {
  requireNode();
  const settings = readSettings(readEnvFile(path.join(root, '.env')), process.env);
  const { storage } = portsOf(settings, false);
  mkdirSync(data, { recursive: true });
  await requirePackages(house.say, house.watchOver);
  await build(house.say, ['api'], house.watchOver);
  const pg = await startPostgres({ dir: path.join(data, 'postgres'), ...(settings['PG_BIN'] ? { bin: settings['PG_BIN'] } : {}), say: house.say });
  house.atEnd(() => pg.stop());
  pg.createDatabase('tally');
  if (storage && (await isFree(storage.port))) await startStandIns(house, { ports: { storage }, env: {}, data });
  const env = {
    ...settings,
    ...(storage ? storageStandIn(storage.port) : {}),
    FILES_DIR: settings['FILES_DIR'] ? path.resolve(root, settings['FILES_DIR']) : path.join(data, 'files'),
    DATABASE_OWNER_URL: pg.url('tally_owner', 'tally'),
    QUEUE_URL: pg.url('queue_owner', 'tally'),
    PG_BIN: pg.address.bin,
  };
  // folders are meant from where the command was given
  const { code, output, errors } = await runNode([path.join(root, `api/dist/operation/${command}.js`), ...args], { cwd: process.env['INIT_CWD'] ?? process.cwd(), env, onStart: house.watchOver });
  process.stdout.write(output);
  process.stderr.write(errors);
  await house.stop(code === 0 ? 0 : 1);
} catch (error) {
  await house.fail(error);
}
