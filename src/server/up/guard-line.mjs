import { spawn } from 'node:child_process';
import process from 'node:process';
import { fileURLToPath } from 'node:url';

let guard;

/**
 * Starts the guard: a small process of its own that outlives us for a moment if we are killed outright,
 * and then ends what we had started. It learns of our end because the pipe between us breaks.
 */
export function startGuard() {
  if (guard) return;
  guard = spawn(process.execPath, [fileURLToPath(new URL('./guard.mjs', import.meta.url))], {
    stdio: ['pipe', 'ignore', 'ignore'],
    detached: true,
    cwd: '/',
  });
  guard.stdin.on('error', () => undefined);
  guard.unref();
  guard.stdin.unref?.();
}

/** Tells the guard what there is to end, or no longer is. Without a guard (in tests, say) nothing happens. */
export function tell(message) {
  guard?.stdin.write(`${JSON.stringify(message)}\n`);
}

/** All was taken down in order: the guard has nothing left to do. */
export function dismissGuard() {
  tell({ done: true });
  guard = undefined;
}
