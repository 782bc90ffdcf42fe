// Ends what its parent started, should the parent be killed outright. See guard-line.mjs.
import process from 'node:process';
import { createInterface } from 'node:readline';
import { setTimeout as sleep } from 'node:timers/promises';
import { leaveCluster } from './cluster.mjs';
import { isAlive } from './processes.mjs';

const watched = new Map();
const clusters = [];
let done = false;

function signal(pid, name) {
  for (const target of [-pid, pid])
    try {
      process.kill(target, name);
      return;
    } catch {
      // no such group, or gone
    }
}

for (const name of ['SIGINT', 'SIGHUP', 'SIGTERM']) process.on(name, () => undefined);

for await (const line of createInterface({ input: process.stdin })) {
  const message = JSON.parse(line);
  if (message.watch) watched.set(message.watch, message.born);
  if (message.unwatch) watched.delete(message.unwatch);
  if (message.cluster) clusters.push(message.cluster);
  if (message.done) done = true;
}

if (!done) {
  const left = () => [...watched].filter(([pid, born]) => isAlive(pid, born)).map(([pid]) => pid);
  for (const pid of left()) signal(pid, 'SIGTERM');
  for (let i = 0; i < 80 && left().length > 0; i++) await sleep(100);
  for (const pid of left()) signal(pid, 'SIGKILL');
  for (const { home, user } of clusters) await leaveCluster(home, user);
}
process.exit(0);
