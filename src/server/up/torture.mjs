import process from 'node:process';
import { buildIfStale } from './build.mjs';
import { root } from './place.mjs';
import { run } from './processes.mjs';
import { ensurePostgres } from './programs.mjs';
import { say, sayAside } from './say.mjs';

/**
 * Runs tests/torture/run.ts: an installation of its own under load, to which things are done at random for
 * TORTURE_MINUTES (10). Figures go to the output, `name value unit`; ends with 1 where something did not hold.
 */
export async function torture(rest) {
  sayAside();
  await ensurePostgres();
  await buildIfStale();
  say('torture: this takes some minutes');
  const result = await run(process.execPath, ['--import', 'tsx', 'tests/torture/run.ts', ...rest], {
    cwd: root,
    env: { ...process.env, DATABASE_URL: '' },
    onLine: (line) =>
      (/^[\w.]+ -?[\d.]+(e[+-]?\d+)? \S+$/.test(line) ? process.stdout : process.stderr).write(`${line}\n`),
  });
  return result.code ?? 1;
}
