// Starts a program as the launcher does and tells its number.
import path from 'node:path';
import { startNode } from '../../lib/children.mjs';

const child = startNode([path.join(import.meta.dirname, 'sleeper.mjs')], { output: 'ignore' });
child.once('message', () => process.send?.(child.pid));
setInterval(() => {}, 1000);
