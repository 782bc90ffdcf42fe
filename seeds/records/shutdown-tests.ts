import { randomUUID } from 'node:crypto';
import type { Knex } from 'knex';
import type { FleetPlan } from '../../simulator/plant/plan';
import {
  recordOf,
  type Act,
  type KeptAct,
  type RoundEvidence,
  type TestedPart,
  type TestFacts,
} from '../../src/domain/commissioning/shutdown-test-record';
import { judgeTest, type CarriedResult } from '../../src/domain/commissioning/shutdown-test-verdict';
import type { SignedTest, TestLink } from '../../src/schemas/api/shutdown-test';
import { insertSigned } from '../../src/server/queries/shutdown-tests';
import { watchedZone } from '../../src/server/queries/shutdown-test-evidence';
import { fingerprintOf } from '../../src/server/reports/fingerprint';
import { insertRows, known } from '../plant/rows';
import type { SeededSite } from '../plant/seeded';
import { reading, roundSeen, roundsOf, vocOf } from './shutdown-test-seen';

/**
 * Shutdown tests of the demo: signed ones at hand-over and a year later with readings and traces, one that failed and
 * was repeated for what had failed, and one under way at the site that is being commissioned.
 */
const DAY_S = 86_400;
const FAILED_ONCE = { site: 'Kestrel Row School', zone: 'Gym', string: 'C2', positions: [3, 11] };
const INSTRUMENT = {
  name: 'Hawkbill 15',
  serial: 'HB-20881',
  category: 'CAT III',
  ratedV: 1500,
  provedBefore: true,
} as const;

export interface Signer {
  id: number;
  name: string;
}

export async function writeShutdownTests(
  db: Knex.Transaction,
  fleet: FleetPlan,
  site: SeededSite,
  signer: Signer,
): Promise<void> {
  const { plan } = site;
  for (const zone of plan.zones) {
    const zoneId = known(site.zones, zone.name, 'the zone');
    const place = new Zone(db, site, zoneId, signer, plan.contactName);
    if (plan.switchedOnOn === null) {
      await place.begin(fleet.since - 5400);
      continue;
    }
    const handOverS = Date.parse(plan.switchedOnOn) / 1000 + 12 * 3600 - plan.longitude * 240;
    const times = [handOverS, handOverS + 366 * DAY_S].filter((t) => t < fleet.since - 3 * DAY_S);
    const failed = plan.name === FAILED_ONCE.site && zone.name === FAILED_ONCE.zone;
    for (const [i, atS] of times.entries()) {
      if (i === 0 && failed) {
        await place.sign(atS - 2 * DAY_S, { passing: FAILED_ONCE });
        await place.sign(atS, { only: FAILED_ONCE.string });
      } else await place.sign(atS, {});
    }
  }
}

interface Course {
  /** Units that keep passing. */
  passing?: { string: string; positions: number[] };
  /** Repeats the test before for this string. */
  only?: string;
}
interface Before {
  id: number;
  link: TestLink;
  signed: SignedTest;
}

class Zone {
  private before: Before | null = null;

  constructor(
    private readonly db: Knex.Transaction,
    private readonly site: SeededSite,
    private readonly zoneId: number,
    private readonly signer: Signer,
    private readonly witness: string,
  ) {}

  private async facts(): Promise<{ facts: TestFacts; dbIds: Map<string, number> }> {
    const zone = await watchedZone(this.db, this.zoneId);
    if (!zone) throw new Error('A zone of the demo is not in the database.');
    return { facts: zone.facts, dbIds: new Map(zone.strings.map((s) => [s.part.id, s.dbId])) };
  }

  private async draft(
    startedS: number,
    acts: readonly KeptAct[],
    closedS: number | null,
  ): Promise<{ id: number; ref: string }> {
    const iso = (s: number) => new Date(s * 1000).toISOString();
    const [draft] = await insertRows<{ id: number; ref: string }>(
      this.db,
      'shutdown_test_draft',
      {
        site_id: 'int4',
        zone_id: 'int4',
        started_by: 'int4',
        started_at: 'timestamptz',
        follows: 'int4',
        ref: 'uuid',
      },
      [
        {
          site_id: this.site.id,
          zone_id: this.zoneId,
          started_by: this.signer.id,
          started_at: iso(startedS),
          follows: this.before?.id ?? null,
          ref: randomUUID(),
        },
      ],
      ['id', 'ref'],
    );
    if (!draft) throw new Error('The database gave no number for a draft.');
    await insertRows(
      this.db,
      'shutdown_test_act',
      {
        ref: 'uuid',
        draft_id: 'int4',
        site_id: 'int4',
        kind: 'text',
        body: 'jsonb',
        person_id: 'int4',
        at: 'timestamptz',
        recorded_at: 'timestamptz',
      },
      acts.map((a) => ({
        ref: a.id,
        draft_id: draft.id,
        site_id: this.site.id,
        kind: a.act.kind,
        body: a.act,
        person_id: this.signer.id,
        at: a.at,
        recorded_at: a.recordedAt,
      })),
    );
    if (closedS !== null)
      await this.db('shutdown_test_draft')
        .where('id', draft.id)
        .update({ closed_at: iso(closedS), closed_by: this.signer.id, close_reason: 'signed' });
    return draft;
  }

  private act(act: Act, atS: number): KeptAct {
    const at = new Date(atS * 1000).toISOString();
    return { id: randomUUID(), at, recordedAt: at, person: this.signer.name, act };
  }

  private planned(strings: string[], rounds: (string | null)[], atS: number): KeptAct[] {
    const year = new Date(atS * 1000).getUTCFullYear();
    const calibrated = `${year}-02-11`;
    const before = new Date(atS * 1000).toISOString().slice(0, 10) < calibrated;
    return [
      this.act(
        {
          kind: 'planned',
          plan: {
            onSite: this.signer.name,
            operator: this.witness,
            others: strings.length > 6 ? 'Two more people with instruments of the same make' : '',
            strings,
            rounds,
            light: 'bright',
            weather: 'Clear, light wind',
            instrument: { ...INSTRUMENT, calibratedOn: before ? `${year - 1}-02-11` : calibrated },
          },
        },
        atS - 900,
      ),
      this.act({ kind: 'caution_accepted', name: this.signer.name }, atS - 840),
    ];
  }

  /** A test that somebody has prepared and not begun to watch. */
  async begin(atS: number): Promise<void> {
    const { facts } = await this.facts();
    await this.draft(
      atS - 960,
      this.planned(
        facts.strings.map((s) => s.id),
        roundsOf(facts, facts.strings),
        atS,
      ),
      null,
    );
  }

  async sign(atS: number, course: Course): Promise<void> {
    const { facts, dbIds } = await this.facts();
    const tested = facts.strings.filter((s) => course.only === undefined || s.name === course.only);
    const rounds = roundsOf(facts, tested);
    const volts = await vocOf(this.db, this.zoneId);
    const acts = this.planned(
      tested.map((s) => s.id),
      rounds,
      atS,
    );
    const evidence: RoundEvidence[] = [];
    let startS = atS;
    for (const [i, transmitter] of rounds.entries()) {
      const own = tested.filter((s) => transmitter === null || s.transmitters.includes(transmitter));
      const commandS = startS + 90;
      acts.push(this.act({ kind: 'watch_started', round: i }, startS));
      // reports show the units of the others; what tells nothing is measured in every round
      const measured = own.filter((s) => transmitter === null || s.kind === 'shutdown_only');
      const live = (s: TestedPart) => (course.passing?.string === s.name ? course.passing.positions : []);
      for (const [k, s] of measured.entries())
        acts.push(this.act(reading(i, s, volts.get(s.id) ?? 0, null, []), startS + 10 + (k % 40)));
      acts.push(this.act({ kind: 'operated', round: i }, commandS + 1));
      for (const s of measured)
        acts.push(
          this.act(reading(i, s, volts.get(s.id) ?? 0, live(s).length > 0 ? 41 : 24, live(s)), commandS + 26),
        );
      acts.push(this.act({ kind: 'released', round: i }, commandS + 100));
      acts.push(this.act({ kind: 'round_ended', round: i }, commandS + 280));
      evidence.push(roundSeen(facts, own, volts, commandS, transmitter, live));
      startS = commandS + 400;
    }
    acts.push(this.act({ kind: 'proved_after', proved: true }, startS));
    const record = recordOf(acts);
    const signedS = startS + 120;
    const draft = await this.draft(atS - 960, acts, signedS);
    const before = this.before;
    const carried = (before?.signed.verdict.strings ?? []).map((v): CarriedResult => ({
      string: v.string,
      name: v.name,
      result: v.result,
      words: `Not tested again: the result of ${(v.carriedFrom?.at ?? before?.link.at ?? '').slice(0, 10)} stands.`,
      test: v.carriedFrom?.test ?? before?.link.test ?? '',
      at: v.carriedFrom?.at ?? before?.link.at ?? '',
    }));
    const began = new Date(atS * 1000).toISOString();
    const signed: SignedTest = {
      version: 1,
      test: draft.ref,
      facts,
      record,
      evidence,
      verdict: judgeTest(facts, record, evidence, carried),
      follows: course.only === undefined ? null : (before?.link ?? null),
      signature: { name: this.signer.name, role: 'technician', at: new Date(signedS * 1000).toISOString() },
    };
    const id = await insertSigned(this.db, {
      head: {
        draftId: draft.id,
        ref: draft.ref,
        siteId: this.site.id,
        zoneId: this.zoneId,
        followsId: signed.follows === null ? null : (before?.id ?? null),
      },
      personId: this.signer.id,
      personName: this.signer.name,
      at: began,
      result: signed.verdict.result,
      fingerprint: fingerprintOf(signed),
      detail: signed,
      supersedes: before === null ? [] : [before.id],
      strings: signed.verdict.strings.map((v) => ({
        stringId: known(dbIds, v.string, 'the string'),
        result: v.result,
        carriedFrom: v.carriedFrom === null ? null : (before?.id ?? null),
      })),
    });
    this.before = { id, link: { test: draft.ref, at: began }, signed };
  }
}
