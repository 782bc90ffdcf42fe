import { startWorker, stopWorker } from '../../src/server/jobs/worker';

/**
 * A worker as a process of its own, to be killed: it says on its output when it works. Ends on its input's end.
 */
await startWorker();
process.stdout.write('working\n');
process.stdin.on('end', () => {
  void stopWorker().then(() => process.exit(0));
});
process.stdin.resume();
