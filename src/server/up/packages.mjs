import fs from 'node:fs';
import path from 'node:path';
import process from 'node:process';
import { fileURLToPath } from 'node:url';
import { locked } from './lock.mjs';
import { root } from './place.mjs';
import { run } from './processes.mjs';
import { say, Stop } from './say.mjs';

const read = (file) => JSON.parse(fs.readFileSync(new URL(file, root), 'utf8'));

/**
 * Whether node_modules is what package-lock.json asks for. npm writes its own list as its last step, so an
 * installation that was killed has none.
 */
export function packagesFit() {
  let wanted;
  let there;
  try {
    wanted = read('package-lock.json').packages;
    there = read('node_modules/.package-lock.json').packages;
  } catch {
    return false;
  }
  return Object.entries(wanted).every(
    ([place, entry]) =>
      place === '' || there[place]?.version === entry.version || entry.optional || entry.devOptional,
  );
}

/** Installs the packages where they are missing, stale or half there. */
export async function ensurePackages() {
  if (packagesFit()) return;
  // beside the checkout's files and not in node_modules, which npm ci removes
  const lock = path.join(fileURLToPath(root), '.packages.lock');
  await locked(
    lock,
    async () => {
      if (packagesFit()) return;
      say('installing packages (npm ci)');
      const npm = process.env.npm_execpath;
      const args = ['ci', '--no-audit', '--no-fund', '--include=dev'];
      const result = npm?.endsWith('.js')
        ? await run(process.execPath, [npm, ...args], { cwd: root })
        : await run('npm', args, { cwd: root });
      if (result.code !== 0)
        throw new Stop(
          `npm ci failed:\n${result.out.trim().split('\n').slice(-12).join('\n')}`,
          'Check the connection to the package registry, then start again.',
        );
    },
    (holder) => say(`waiting for another installation of packages (process ${holder?.pid ?? '?'})`),
    900_000,
  );
}
