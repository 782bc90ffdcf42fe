import fs from 'node:fs';
import { fileURLToPath } from 'node:url';
import { build } from 'esbuild';

/** As deep as a source of the server: what it looks for beside itself, migrations, is where it looks. */
const FOLDER = fileURLToPath(new URL('../../node_modules/.wakeline/tests', import.meta.url));

type Program = 'job-process' | 'role-process';
const made = new Map<Program, Promise<string>>();

/**
 * A program of tests/support, made one file to be started often: read source by source, a start costs seconds of work.
 * @returns the file
 */
export function programOf(name: Program): Promise<string> {
  const file = made.get(name) ?? make(name);
  made.set(name, file);
  return file;
}

async function make(name: Program): Promise<string> {
  const file = `${FOLDER}/${name}.mjs`;
  const unfinished = `${file}.${process.pid}.tmp`;
  await build({
    entryPoints: [fileURLToPath(new URL(`${name}.ts`, import.meta.url))],
    outfile: unfinished,
    bundle: true,
    packages: 'external',
    platform: 'node',
    format: 'esm',
    target: `node${process.versions.node}`,
    logLevel: 'silent',
  });
  fs.renameSync(unfinished, file); // whoever makes the same meanwhile reads a whole one
  return file;
}
