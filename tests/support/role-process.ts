import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import { answerProbe } from '../../src/server/observe/probes';
import { routeUpgrade, refuseUpgrade, startRoles, stopRoles } from '../../src/server/roles';

/**
 * A process of the installation without its pages: the roles of WAKELINE_ROLES, its sockets and probes. Says its port on
 * its output when it works; ends in order at its input's end.
 */
const server = createServer((req, res) => {
  if (!answerProbe(req, res)) res.writeHead(404).end();
});
server.on('upgrade', (req, socket, head) => {
  if (!routeUpgrade(req, socket, head)) refuseUpgrade(socket, '404 Not Found');
});
await startRoles();
await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
process.stdout.write(`${(server.address() as AddressInfo).port}\n`);
process.stdin.on('end', () => {
  server.close();
  void stopRoles().then(() => process.exit(0));
});
process.stdin.resume();
