import net from 'node:net';
import { codeOf, Failure } from './failure.mjs';
import { pause } from './processes.mjs';

/**
 * Whether this process could listen on the loopback port now; else the system's reason (EADDRINUSE, EACCES).
 * @param {number} port 0 asks for any free port
 * @returns {Promise<{ port: number } | { reason: string }>}
 */
function tryPort(port) {
  return new Promise((resolve) => {
    const server = net.createServer();
    server.once('error', (error) => resolve({ reason: codeOf(error) ?? error.message }));
    server.listen({ port, host: '127.0.0.1', exclusive: true }, () => {
      const address = server.address();
      const found = typeof address === 'object' && address ? address.port : port;
      server.close(() => resolve({ port: found }));
    });
  });
}

/** @returns {Promise<number>} a loopback port that was free a moment ago */
export async function freePort() {
  const answer = await tryPort(0);
  if ('reason' in answer) throw new Error(`no free port on 127.0.0.1 (${answer.reason})`);
  return answer.port;
}

/** @param {number} port */
export const isFree = async (port) => 'port' in (await tryPort(port));

/**
 * Refuses with one line that names the port, who wants it and the variable that moves it.
 * @param {{ port: number, variable: string, what: string }[]} wanted
 * @param {number} patience how long to wait (ms) for processes of a killed launcher that are still leaving
 */
export async function requireFreePorts(wanted, patience = 0) {
  const twice = wanted.find((one, i) => wanted.findIndex((other) => other.port === one.port) < i);
  if (twice) {
    const first = wanted.find((other) => other.port === twice.port);
    throw new Failure(`${first?.variable} and ${twice.variable} are both ${twice.port}; give each its own port in .env.`);
  }
  const until = Date.now() + patience;
  for (const { port, variable, what } of wanted) {
    for (let answer = await tryPort(port); 'reason' in answer; answer = await tryPort(port)) {
      if (answer.reason === 'EADDRINUSE' && Date.now() < until) {
        await pause(100);
        continue;
      }
      const why = answer.reason === 'EADDRINUSE' ? 'is already in use' : `can't be opened (${answer.reason})`;
      throw new Failure(`Port ${port}, wanted by ${what}, ${why}. Free it, or set ${variable} to another port in .env.`);
    }
  }
}
