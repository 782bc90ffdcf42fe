import { createHash } from 'node:crypto';
import fs from 'node:fs';
import path from 'node:path';
import process from 'node:process';
import { fileURLToPath } from 'node:url';
import { locked } from './lock.mjs';
import { root } from './place.mjs';
import { run } from './processes.mjs';
import { say, Stop } from './say.mjs';

const at = (file) => fileURLToPath(new URL(file, root));
const MARK = at('dist/.made-from');
const INPUTS = [
  'src',
  'public',
  'astro.config.mjs',
  'tailwind.config.mjs',
  'tsconfig.json',
  'package-lock.json',
];
const NO_PART = /\.test\.tsx?$|^src\/server\/up(\/|\.mjs$)/; // tests and this start-up are not in the bundle

/** A fingerprint of everything that the build reads. */
export function sourcesHash() {
  const hash = createHash('sha256');
  const add = (relative) => {
    const full = at(relative);
    const stat = fs.statSync(full, { throwIfNoEntry: false });
    if (!stat || NO_PART.test(relative)) return;
    if (stat.isDirectory())
      for (const entry of fs.readdirSync(full).sort()) add(path.posix.join(relative, entry));
    else hash.update(`${relative}\0`).update(fs.readFileSync(full)).update('\0');
  };
  INPUTS.forEach(add);
  return hash.update(`${process.version}\0${process.env.WAKELINE_LANGUAGE || 'en'}`).digest('hex');
}

const madeFrom = () => {
  try {
    return fs.readFileSync(MARK, 'utf8');
  } catch {
    return '';
  }
};

/** The environment without what a test runner puts there: the build is the same whoever starts it. */
const RUNNERS = /^(DEV|PROD|MODE|SSR|TEST|BASE_URL|VITEST.*)$/;
const withoutRunner = (env) =>
  Object.fromEntries(Object.entries(env).filter(([name]) => !RUNNERS.test(name)));

/** Builds the site where the sources changed since the last complete build. */
export async function buildIfStale() {
  if (madeFrom() === sourcesHash()) return;
  await locked(
    at('node_modules/.wakeline-build.lock'),
    async () => {
      const wanted = sourcesHash();
      if (madeFrom() === wanted) return; // another start did it meanwhile
      say('building the site');
      const result = await run(process.execPath, ['node_modules/astro/astro.js', 'build'], {
        cwd: root,
        env: {
          ...withoutRunner(process.env),
          NODE_ENV: 'production',
          ASTRO_TELEMETRY_DISABLED: '1',
          ASTRO_DISABLE_UPDATE_CHECK: 'true',
        },
      });
      if (result.code !== 0)
        throw new Stop(`The build failed:\n${result.out.trim().split('\n').slice(-30).join('\n')}`);
      fs.writeFileSync(MARK, wanted);
    },
    (holder) => say(`waiting for another build (process ${holder?.pid ?? '?'})`),
    600_000,
  );
}
