import fs from 'node:fs';
import process from 'node:process';
import { setTimeout as sleep } from 'node:timers/promises';
import { bornAt, isAlive } from './processes.mjs';
import { Stop } from './say.mjs';

/** Who holds a lock file, if that process still runs. */
export function holderOf(file) {
  try {
    const holder = JSON.parse(fs.readFileSync(file, 'utf8'));
    return isAlive(holder.pid, holder.born) ? holder : null;
  } catch {
    return null;
  }
}

/** Takes the lock file if nobody living holds it. The file appears with its content at once, by a hard link. */
export function takeLock(file, note = {}) {
  const mine = `${file}.${process.pid}`;
  fs.writeFileSync(mine, JSON.stringify({ pid: process.pid, born: bornAt(process.pid), ...note }), {
    mode: 0o644,
  });
  try {
    for (let attempt = 0; attempt < 3; attempt++) {
      try {
        fs.linkSync(mine, file);
        return true;
      } catch (error) {
        if (error.code !== 'EEXIST') throw error;
      }
      if (holderOf(file)) return false;
      takeAway(file);
    }
    return false;
  } finally {
    fs.rmSync(mine, { force: true });
  }
}

// a dead holder's file goes by rename, so that of two who see it only one removes it; a live one taken by mistake is put back
function takeAway(file) {
  const aside = `${file}.${process.pid}.dead`;
  try {
    fs.renameSync(file, aside);
    if (holderOf(aside)) fs.linkSync(aside, file);
  } catch (error) {
    if (error.code !== 'ENOENT' && error.code !== 'EEXIST') throw error;
  } finally {
    fs.rmSync(aside, { force: true });
  }
}

export const dropLock = (file) => fs.rmSync(file, { force: true });

/** Runs `work` while holding the lock; waits for another holder as long as that one lives. */
export async function locked(file, work, onWait = () => undefined, patienceMs = 180_000) {
  for (let waited = 0; !takeLock(file); waited += 200) {
    if (waited === 1000) onWait(holderOf(file));
    if (waited > patienceMs)
      throw new Stop(
        `Another process (${holderOf(file)?.pid ?? '?'}) has been holding ${file} for ${patienceMs / 1000} s.`,
        'End that process, then start again.',
      );
    await sleep(200);
  }
  try {
    return await work();
  } finally {
    dropLock(file);
  }
}
