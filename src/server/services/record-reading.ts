import type { Actor } from '../../domain/access/permissions';
import { readingAround } from '../../domain/commissioning/readings/around';
import { judgeReading } from '../../domain/commissioning/readings/judge-reading';
import { KIND_WORDS } from '../../words/domain-reading-stages';
import type { ReadingInput, ReadingRecord } from '../../schemas/api/readings';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { lockString, moduleTypesOf, stringSheets, unitTypesOf } from '../queries/captured-site';
import { tellSiteChanged } from '../queries/live-notices';
import {
  conditionsAt,
  insertReading,
  latestReadings,
  readingByRef,
  readingOut,
  type KeptReading,
} from '../queries/readings';
import { visibleSite } from '../queries/visible-site';
import type { Recorded } from './record-check';
import { clockFault, recordedMeanwhile, refTaken, refuseFaults } from './recorded';
import { recordReadingRefusals } from '../../words/refusals-as-built';

/**
 * Records one meter reading and judges it: against what should be at that moment by type, command and roll call, with
 * readings of other strings under the same light, and with what a sensor had.
 * @throws AppError not_found · invalid (field and remedy) · conflict (`current` where somebody was first)
 */
export async function recordReading(
  tx: Tx,
  actor: Actor,
  siteRef: string,
  input: ReadingInput,
  now: Date,
): Promise<Recorded<ReadingRecord>> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const string = found(await lockString(tx, site.id, input.stringId), recordReadingRefusals.stringHere);
  const known = await readingByRef(tx, input.ref);
  if (known) {
    if (!sameReading(known, input, actor)) throw refTaken();
    return { record: readingOut(known), made: false };
  }
  const clock = clockFault(input.at, now);
  refuseFaults(clock ? [clock] : []);
  const readings = await latestReadings(tx, site.id);
  const current = readings.find(
    (r) => r.stringId === input.stringId && r.stage === input.stage && r.kind === input.kind,
  );
  if ((current?.ref ?? null) !== input.supersedes)
    throw recordedMeanwhile(
      recordReadingRefusals.readingOf(KIND_WORDS[input.kind], string.name),
      current ? readingOut(current) : null,
    );
  const judged = await judgedReading(tx, site.id, string, input, readings);
  const made = await insertReading(tx, {
    siteId: site.id,
    stringId: string.id,
    personId: actor.personId,
    input,
    ...judged,
  });
  if (!made) throw refTaken();
  await tellSiteChanged(tx, site.id);
  return { record: readingOut(made), made: true };
}

async function judgedReading(
  tx: Tx,
  siteId: number,
  string: { id: number; name: string },
  input: ReadingInput,
  readings: readonly KeptReading[],
): Promise<{ finding: NonNullable<ReadingRecord['finding']>; siblings: string[] }> {
  const at = new Date(input.at);
  const strings = (await stringSheets(tx, siteId, at)).map((s) => ({
    ...s,
    readings: readings.filter((r) => r.stringId === s.id),
  }));
  if (!strings.some((s) => s.id === input.stringId))
    throw new AppError('conflict', {
      message: recordReadingRefusals.noSlots(string.name),
    });
  const sheet = {
    unitTypes: await unitTypesOf(tx, siteId),
    moduleTypes: await moduleTypesOf(tx, siteId),
    strings,
  };
  const around = readingAround(sheet, input.stringId, input, await conditionsAt(tx, string.id, at));
  const names = new Set(around.siblings.map((s) => s.name));
  return {
    finding: judgeReading(input, around),
    siblings: strings
      .filter((s) => names.has(s.name))
      .flatMap((s) =>
        s.readings
          .filter((r) => r.stage === input.stage && r.kind === 'positive_to_negative')
          .map((r) => r.ref),
      ),
  };
}

// a voltage is kept in single precision
const content = (r: Omit<ReadingInput, 'ref'>): string =>
  JSON.stringify([
    r.stringId,
    r.stage,
    r.kind,
    r.light,
    r.meterMode,
    r.commanded,
    Math.fround(r.voltage),
    r.note,
    new Date(r.at).toISOString(),
  ]);
const sameReading = (kept: KeptReading, input: ReadingInput, actor: Actor): boolean =>
  kept.personId === actor.personId && content(kept) === content(input);
