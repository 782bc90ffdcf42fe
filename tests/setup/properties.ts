import fc from 'fast-check';

/**
 * Properties are tried with the same cases in every run: what fails is what was changed. `PROPERTY_SEED=random` goes
 * looking for others, a number (the one that a failure names) has those again.
 */
const { PROPERTY_SEED: wanted = '20261201' } = process.env;
if (wanted !== 'random') {
  const seed = Number(wanted);
  if (!Number.isInteger(seed)) throw new Error('PROPERTY_SEED is a whole number or "random".');
  fc.configureGlobal({ ...fc.readConfigureGlobal(), seed });
}
