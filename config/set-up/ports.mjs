import { createServer } from 'node:net';
import { SetUpError } from './steps.mjs';

/** Whether a loopback port can be listened on. */
function isFree(port) {
  return new Promise((resolve) => {
    const probe = createServer();
    probe.once('error', () => resolve(false));
    probe.listen(port, '127.0.0.1', () => probe.close(() => resolve(true)));
  });
}

/**
 * @param {readonly { variable: string, port: number, what: string }[]} wanted
 * @throws SetUpError naming every port that somebody else holds and the setting that moves it
 */
export async function checkPorts(wanted) {
  const taken = [];
  for (const entry of wanted) if (!(await isFree(entry.port))) taken.push(entry);
  if (taken.length === 0) return;
  const lines = taken.map(
    ({ variable, port, what }) =>
      `  port ${port} for ${what}; choose another with ${variable}=${port + 10} npm start`,
  );
  throw new SetUpError(
    `Another program already uses:\n${lines.join('\n')}\nStop that program (ss -ltnp shows it) or choose other ports.`,
  );
}

/** As many free loopback ports as asked for, all different. */
export async function freePorts(count) {
  const held = [];
  for (let index = 0; index < count; index++) {
    const server = createServer();
    await new Promise((resolve, reject) => {
      server.once('error', reject);
      server.listen(0, '127.0.0.1', resolve);
    });
    held.push(server);
  }
  const ports = held.map((server) => server.address().port);
  await Promise.all(held.map((server) => new Promise((resolve) => server.close(resolve))));
  return ports;
}
