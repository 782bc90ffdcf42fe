import { end } from './processes.mjs';
import { say } from './say.mjs';

/** Resolves when the part ends by itself. */
const endOf = (child, name) =>
  new Promise((resolve) => {
    child.once('exit', (code, signal) => resolve({ name, code, signal }));
    child.once('error', (error) => resolve({ name, code: error.message, signal: null }));
  });

const TRIES = 5;

/**
 * A part that falls is started again, so that what is in view stays; not before `stands`, for then it would fall again
 * for the same reason. Resolves when that is given up.
 */
export function keepRunning(begin, { name, patienceMs, stands = () => true, pauseMs = 2000 }, atEnd) {
  let part;
  let ending = false;
  atEnd(() => {
    ending = true;
    return end(part, patienceMs);
  });
  return new Promise((resolve) => {
    const attempt = (nth) => {
      part = begin();
      void endOf(part, name).then((how) => {
        if (ending) return;
        if (nth === TRIES || !stands()) return resolve(how);
        say(`${name} has ended (${how.signal ?? `exit ${how.code}`}): starting it again`);
        setTimeout(() => ending || attempt(nth + 1), pauseMs);
      });
    };
    attempt(1);
  });
}
