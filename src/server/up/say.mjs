import process from 'node:process';

/** Ends the run with one thing for the reader to do; printed without a stack. */
export class Stop extends Error {
  /** @param {string} message what is the matter @param {string} [remedy] the one thing to do */
  constructor(message, remedy) {
    super(remedy ? `${message}\n${remedy}` : message);
    this.name = 'Stop';
  }
}

const began = process.hrtime.bigint();
/** Seconds since this process began to work. */
export const elapsedS = () => Number(process.hrtime.bigint() - began) / 1e9;

let stream = process.stdout;
/** Progress to the error stream: where the output is figures for a program to read. */
export function sayAside() {
  stream = process.stderr;
}

/** One line of progress with the seconds since the start. */
export function say(line) {
  stream.write(`${elapsedS().toFixed(1).padStart(6)} s  ${line}\n`);
}
