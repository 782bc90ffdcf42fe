import { tryForeign } from './shards/foreign';
import { tryGroups } from './shards/groups';
import { threeServers } from './shards/three';

/**
 * Two ways past one server, tried on three clusters on this machine: frames as hash partitions on other servers over
 * postgres_fdw, and a database for each group of organisations. They tell what is right and what a question costs, not how
 * far it scales: all three share the same two cores and one disk, with fsync off. The decision is in DEVELOPERS.md.
 */
const say = (text: string) => process.stderr.write(`${text}\n`);
const figure = (name: string, value: number, unit: string, digits = 3) =>
  process.stdout.write(`shards.${name} ${value.toFixed(digits)} ${unit}\n`);

const three = await threeServers();
try {
  const only = process.argv[2]; // foreign or groups
  if (only !== 'groups') await tryForeign(three, { figure, say });
  if (only !== 'foreign') await tryGroups(three, { figure, say });
} finally {
  await three.stop();
}
