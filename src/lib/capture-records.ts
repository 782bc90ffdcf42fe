import type { CaptureSnapshot, CaptureString } from '../schemas/api/capture';
import type { CheckInput, CheckRecord } from '../schemas/api/checks';
import type { ReadingInput, ReadingRecord } from '../schemas/api/readings';
import { inOrder, type Waiting } from './capture-queue';

/** Records as the phone shows them: those of the snapshot, and over them what waits to be sent. */

export type ShownReading = CaptureString['readings'][number] & { waiting?: boolean };
export type ShownCheck = CaptureString['checks'][number] & { waiting?: boolean };

const withReading = (string: CaptureString, reading: ShownReading): CaptureString => ({
  ...string,
  readings: [...string.readings.filter((r) => r.stage !== reading.stage || r.kind !== reading.kind), reading],
});
const withCheck = (string: CaptureString, check: ShownCheck): CaptureString => ({
  ...string,
  checks: [...string.checks.filter((c) => c.check !== check.check), check],
  // what is signed is what the server has: until it has said what that is now, nothing can be signed
  fingerprint: '',
  signOff: string.signOff && { ...string.signOff, stale: true },
});

const changed = (
  snapshot: CaptureSnapshot,
  stringId: string,
  change: (string: CaptureString) => CaptureString,
): CaptureSnapshot => ({
  ...snapshot,
  strings: snapshot.strings.map((s) => (s.id === stringId ? change(s) : s)),
});

/** The snapshot with a record that the server has stored since. */
export function withStored(
  snapshot: CaptureSnapshot,
  kind: Waiting['kind'],
  stored: ReadingRecord | CheckRecord,
): CaptureSnapshot {
  return changed(snapshot, stored.stringId, (string) => {
    if (kind === 'reading') return withReading(string, stored as ReadingRecord);
    if (kind === 'check') return withCheck(string, stored as CheckRecord);
    return string;
  });
}

/** The snapshot as it will be once everything of `records` is sent; what wants a decision is left out. */
export function overlaid(snapshot: CaptureSnapshot, records: readonly Waiting[]): CaptureSnapshot {
  let shown = snapshot;
  for (const record of inOrder(records)) {
    if (record.site !== snapshot.site.id || record.person !== snapshot.person.id) continue;
    if (record.state !== 'waiting') continue;
    const own = { recordedAt: record.madeAt, person: snapshot.person.name, waiting: true };
    if (record.kind === 'reading') {
      const body = record.body as unknown as ReadingInput;
      shown = changed(shown, record.string, (s) => withReading(s, { ...body, ...own, finding: null }));
    } else if (record.kind === 'check') {
      const body = record.body as unknown as CheckInput;
      shown = changed(shown, record.string, (s) => withCheck(s, { ...body, ...own }));
    }
  }
  return shown;
}

/** A new identifier; also where the page came over plain HTTP, in which browsers give none ready-made. */
export function newRef(): string {
  if (typeof crypto.randomUUID === 'function') return crypto.randomUUID();
  const bytes = crypto.getRandomValues(new Uint8Array(16));
  bytes[6] = (bytes[6]! & 0x0f) | 0x40;
  bytes[8] = (bytes[8]! & 0x3f) | 0x80;
  const hex = [...bytes].map((b) => b.toString(16).padStart(2, '0')).join('');
  return `${hex.slice(0, 8)}-${hex.slice(8, 12)}-${hex.slice(12, 16)}-${hex.slice(16, 20)}-${hex.slice(20)}`;
}
