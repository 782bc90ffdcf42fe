import { randomBytes } from 'node:crypto';
import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import process from 'node:process';
import { isRoot } from './programs.mjs';
import { Stop } from './say.mjs';

const FIRST_PORT = 54_330;

/** Where the demo's database and its secrets are kept; tests and benches have a folder of their own in it. */
export function homeOf(kind = 'demo') {
  const base =
    process.env.WAKELINE_HOME ||
    (isRoot()
      ? '/var/lib/wakeline'
      : path.join(process.env.XDG_STATE_HOME || path.join(os.homedir(), '.local/state'), 'wakeline'));
  return kind === 'demo' ? path.resolve(base) : path.resolve(base, kind);
}

export function makeHome(home) {
  try {
    fs.mkdirSync(home, { recursive: true, mode: 0o755 });
    fs.accessSync(home, fs.constants.W_OK);
  } catch (error) {
    throw new Stop(
      `The folder ${home} can't be used: ${error.message}`,
      'Set WAKELINE_HOME to a folder that this account may write, then start again.',
    );
  }
}

export const secret = () => randomBytes(18).toString('base64url');

const stateFile = (home) => path.join(home, 'state.json');

function keptState(home) {
  try {
    return JSON.parse(fs.readFileSync(stateFile(home), 'utf8'));
  } catch {
    return {}; // none yet, or cut short: passwords are set anew where they no longer fit
  }
}

/** Whether the home still knows its passwords. */
export const isStateKept = (home) => keptState(home).superPassword !== undefined;

/** What a home remembers: port, passwords, the demo's secret, how far the seed got. Missing parts are made. */
export function readState(home) {
  return {
    port: FIRST_PORT,
    superPassword: secret(),
    ownerPassword: secret(),
    rolesSecret: secret(),
    demoSecret: secret(),
    seed: 'none',
    ...keptState(home),
  };
}

/** Written aside and renamed, so that a kill leaves the old one. */
export function writeState(home, state) {
  const aside = `${stateFile(home)}.${process.pid}`;
  fs.writeFileSync(aside, `${JSON.stringify(state, null, 2)}\n`, { mode: 0o600 });
  fs.renameSync(aside, stateFile(home));
}
