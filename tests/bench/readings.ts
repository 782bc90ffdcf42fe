import { posteriorOf } from '../../src/domain/readings/posterior';
import { TELL_FROM } from '../../src/domain/readings/interpret';
import { generator, simulate } from '../../src/domain/readings/sample-readings';

/**
 * Whether chances mean what they say: of simulated readings whose truth is known, how many of the explanations given a
 * chance of 50 to 60 % are right, and so on; how often the truth is in the set that makes up 95 %. The simulation is not
 * the interpreter's own model: light and temperature are drawn and voc follows by the datasheet's physics, tolerances
 * are triangular or even, siblings may be wrong themselves. `--readings N`: so many (40,000 unless said; of 5,000 the
 * thinnest deciles hold some fifty explanations, which chance alone moves by seven points).
 */
const flag = process.argv.indexOf('--readings');
const count = flag < 0 ? 40_000 : Number(process.argv[flag + 1]);
if (!Number.isInteger(count) || count < 1) throw new Error('--readings takes a whole number, at least 1.');
/** Explanations that hardly count: there are dozens to each reading. */
const LEAST = 0.005;

const print = (name: string, value: number, unit: string): void =>
  void process.stdout.write(`readings.${name} ${Number(value.toFixed(4))} ${unit}\n`);

const deciles = Array.from({ length: 10 }, () => ({ n: 0, given: 0, right: 0 }));
let inSet = 0;
let told = 0;
let toldRight = 0;
const random = generator(20_261_201);
for (let k = 0; k < count; k++) {
  const { question, truth } = simulate(random);
  const { hypotheses, probability } = posteriorOf(question);
  const right = hypotheses.map(
    (h) =>
      h.kind === truth.kind &&
      h.count === truth.count &&
      h.passing === truth.passing &&
      h.inShutdown === truth.inShutdown,
  );
  const order = probability.map((_, i) => i).sort((a, b) => probability[b]! - probability[a]!);
  let sum = 0;
  for (const i of order) {
    if (right[i]) inSet++;
    sum += probability[i]!;
    if (sum >= 0.95) break;
  }
  probability.forEach((p, i) => {
    if (p < LEAST) return;
    const decile = deciles[Math.min(9, Math.floor(10 * p))]!;
    decile.n++;
    decile.given += p;
    if (right[i]) decile.right++;
  });
  const best = order[0]!;
  if (probability[best]! < TELL_FROM) continue;
  told++;
  if (right[best]) toldRight++;
}
print('simulated', count, 'readings');
let worst = 0;
deciles.forEach(({ n, given, right }, d) => {
  const off = 100 * (right / n - given / n);
  worst = Math.max(worst, Math.abs(off));
  print(`decile_${d + 1}.given`, given / n, 'share');
  print(`decile_${d + 1}.right`, right / n, 'share');
  print(`decile_${d + 1}.explanations`, n, 'explanations');
});
print('worst_decile_off', worst, 'points');
print('truth_in_95_percent_set', inSet / count, 'share');
print('told', told / count, 'share');
print('told_right', toldRight / told, 'share');
