import type { Act, KeptAct } from '../../domain/commissioning/shutdown-test-record';
import { WORST, type TestResult } from '../../domain/commissioning/test-results';
import type { SentAct, TestRow, ZoneStanding } from '../../schemas/api/shutdown-test';
import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

/** Drafts of shutdown tests, what was done in them, and the signed ones. The caller found the site as the actor. */

/**
 * What the tests of a site amount to, as a subquery: the newest that stands of each zone, the gravest of them first.
 * `site` is the site's number, a column or a binding.
 */
export const gravestTestOf = (site: string): string => `(
  select newest.* from (
    select distinct on (t.zone_id) t.* from shutdown_test t where t.site_id = ${site} and t.superseded_by is null
    order by t.zone_id, t.at desc, t.id desc) newest
  order by array_position(array['failed', 'not_witnessed', 'consistent', 'passed'], newest.result), newest.at desc limit 1)`;

export interface TestHead {
  draftId: number;
  ref: string;
  siteId: number;
  siteRef: string;
  organisationId: number;
  zoneId: number;
  startedAt: Date;
  startedBy: string;
  followsId: number | null;
  closedAt: Date | null;
  closedBy: string | null;
  closeReason: string | null;
  signedId: number | null;
}

/** A test by its public identifier, if the actor may see its site. `lock`: nobody else writes to it meanwhile. */
export async function testHead(tx: Tx, ref: string, lock = false): Promise<TestHead | undefined> {
  const { rows } = await tx.raw<{ rows: TestHead[] }>(
    `select d.id as "draftId", d.ref, d.site_id as "siteId", site.ref as "siteRef",
            site.organisation_id as "organisationId", d.zone_id as "zoneId", d.started_at as "startedAt",
            s.name as "startedBy", d.follows as "followsId", d.closed_at as "closedAt", c.name as "closedBy",
            d.close_reason as "closeReason", t.id as "signedId"
     from shutdown_test_draft d join site on site.id = d.site_id join person s on s.id = d.started_by
     left join person c on c.id = d.closed_by left join shutdown_test t on t.draft_id = d.id
     where d.ref = :ref and ${SITE_VISIBLE} ${lock ? 'for no key update of d' : ''}`,
    { ref },
  );
  return rows[0];
}

/** Opens a draft; undefined when the zone has an open one already. */
export async function openDraft(
  tx: Tx,
  draft: { siteId: number; zoneId: number; personId: number; followsId: number | null },
): Promise<string | undefined> {
  const { rows } = await tx.raw<{ rows: { ref: string }[] }>(
    `insert into shutdown_test_draft (site_id, zone_id, started_by, follows) values (?, ?, ?, ?)
     on conflict (zone_id) where closed_at is null do nothing returning ref`,
    [draft.siteId, draft.zoneId, draft.personId, draft.followsId],
  );
  return rows[0]?.ref;
}

export async function closeDraft(tx: Tx, draftId: number, personId: number, reason: string): Promise<void> {
  await tx.raw(
    `update shutdown_test_draft set closed_at = now(), closed_by = ?, close_reason = ?
     where id = ? and closed_at is null`,
    [personId, reason, draftId],
  );
}

export async function actsOf(tx: Tx, draftId: number): Promise<KeptAct[]> {
  const { rows } = await tx.raw<{
    rows: { id: string; at: Date; recordedAt: Date; person: string; body: Act }[];
  }>(
    `select a.ref as id, a.at, a.recorded_at as "recordedAt", p.name as person, a.body
     from shutdown_test_act a join person p on p.id = a.person_id where a.draft_id = ? order by a.id`,
    [draftId],
  );
  return rows.map(({ body, at, recordedAt, ...r }) => ({
    ...r,
    at: at.toISOString(),
    recordedAt: recordedAt.toISOString(),
    act: body,
  }));
}

/** Which of these acts are stored already, whichever test they belong to. */
export async function knownActs(tx: Tx, refs: readonly string[]): Promise<Set<string>> {
  const { rows } = await tx.raw<{ rows: { ref: string }[] }>(
    `select ref from shutdown_test_act where ref = any (?::uuid[])`,
    [[...refs]],
  );
  return new Set(rows.map((r) => r.ref));
}

export async function addAct(
  tx: Tx,
  of: { draftId: number; siteId: number; personId: number },
  sent: SentAct,
): Promise<void> {
  await tx.raw(
    `insert into shutdown_test_act (ref, draft_id, site_id, kind, body, person_id, at)
     values (?, ?, ?, ?, ?::jsonb, ?, ?)`,
    [sent.id, of.draftId, of.siteId, sent.act.kind, JSON.stringify(sent.act), of.personId, sent.at],
  );
}

export interface NewSignedTest {
  head: Pick<TestHead, 'draftId' | 'ref' | 'siteId' | 'zoneId' | 'followsId'>;
  personId: number;
  personName: string;
  at: string;
  result: TestResult;
  fingerprint: string;
  detail: object;
  supersedes: number[];
  strings: { stringId: number; result: TestResult; carriedFrom: number | null }[];
}

/** Writes a signed test; the database marks those that it supersedes. Gives its number. */
export async function insertSigned(tx: Tx, signed: NewSignedTest): Promise<number> {
  const { head } = signed;
  const { rows } = await tx.raw<{ rows: { id: number }[] }>(
    `insert into shutdown_test (ref, site_id, zone_id, at, made_by, result, strings, detail, signed_by, fingerprint,
       draft_id, follows, supersedes)
     values (:ref, :siteId, :zoneId, :at, :by, :result, :strings, cast(:detail as jsonb), :personId, :fingerprint, :draftId,
       :followsId, :supersedes) returning id`,
    {
      ref: head.ref,
      siteId: head.siteId,
      zoneId: head.zoneId,
      at: signed.at,
      by: signed.personName,
      result: signed.result,
      strings: signed.strings.length,
      detail: JSON.stringify(signed.detail),
      personId: signed.personId,
      fingerprint: signed.fingerprint,
      draftId: head.draftId,
      followsId: head.followsId,
      supersedes: signed.supersedes,
    },
  );
  const id = rows[0]!.id;
  await tx.raw(
    `insert into shutdown_test_string (test_id, string_id, site_id, result, carried_from)
     select ?, s, ?, r, nullif(c, 0) from unnest(?::int4[], ?::text[], ?::int4[]) x(s, r, c)`,
    [
      id,
      head.siteId,
      signed.strings.map((s) => s.stringId),
      signed.strings.map((s) => s.result),
      signed.strings.map((s) => s.carriedFrom ?? 0),
    ],
  );
  return id;
}

export interface SignedRow {
  id: number;
  ref: string;
  at: Date;
  zone: string | null;
  madeBy: string;
  result: TestResult;
  strings: number;
  detail: unknown;
  fingerprint: string | null;
  supersededBy: { test: string; at: string } | null;
  follows: { test: string; at: string } | null;
}

/** A signed (or earlier) test of a site that the actor sees, with the site's number. */
export async function signedTest(
  tx: Tx,
  by: { ref: string } | { id: number },
): Promise<(SignedRow & { siteRef: string }) | undefined> {
  const { rows } = await tx.raw<{ rows: (SignedRow & { siteRef: string })[] }>(
    `select t.id, t.ref, t.at, z.name as zone, t.made_by as "madeBy", t.result, t.strings, t.detail, t.fingerprint,
            site.ref as "siteRef",
            (select jsonb_build_object('test', n.ref, 'at', n.at) from shutdown_test n where n.id = t.superseded_by) as "supersededBy",
            (select jsonb_build_object('test', f.ref, 'at', f.at) from shutdown_test f where f.id = t.follows) as follows
     from shutdown_test t join site on site.id = t.site_id left join zone z on z.id = t.zone_id
     where (t.ref = cast(:ref as uuid) or t.id = cast(:id as int4)) and ${SITE_VISIBLE}`,
    { ref: 'ref' in by ? by.ref : null, id: 'id' in by ? by.id : null },
  );
  return rows[0];
}

export interface InForce {
  testId: number;
  test: string;
  at: Date;
  stringId: number;
  string: string;
  name: string;
  result: TestResult;
  /** The test in which it was measured, where that is an earlier one. */
  carriedFrom: { id: number; test: string; at: string } | null;
}

/** The result in force of each string that belongs to a zone now. */
export async function resultsInForce(tx: Tx, zoneId: number): Promise<InForce[]> {
  const { rows } = await tx.raw<{ rows: InForce[] }>(
    `select distinct on (s.id) t.id as "testId", t.ref as test, t.at, s.id as "stringId", s.ref as string, s.name, ts.result,
            (select jsonb_build_object('id', c.id, 'test', c.ref, 'at', c.at) from shutdown_test c where c.id = ts.carried_from)
              as "carriedFrom"
     from string s join shutdown_test_string ts on ts.string_id = s.id join shutdown_test t on t.id = ts.test_id
     where s.zone_id = ? order by s.id, t.at desc, t.id desc`,
    [zoneId],
  );
  return rows;
}

/** Tests of a zone that nothing has superseded yet, oldest first, with their strings (empty: earlier records). */
export async function standingTests(
  tx: Tx,
  zoneId: number,
): Promise<{ id: number; stringIds: number[]; signed: boolean }[]> {
  const { rows } = await tx.raw<{ rows: { id: number; stringIds: number[]; signed: boolean }[] }>(
    `select t.id, t.fingerprint is not null as signed,
            coalesce((select array_agg(string_id) from shutdown_test_string where test_id = t.id), '{}') as "stringIds"
     from shutdown_test t where t.zone_id = ? and t.superseded_by is null order by t.id`,
    [zoneId],
  );
  return rows;
}

/** What is known of each zone of a site: see `ZoneStanding`. */
export async function shutdownTestStanding(tx: Tx, siteId: number): Promise<ZoneStanding[]> {
  const { rows } = await tx.raw<{
    rows: (Omit<ZoneStanding, 'zone' | 'untested' | 'result' | 'strings'> & {
      zoneRef: string;
      zone: string;
      signed: boolean | null;
      per: { name: string; result: TestResult | null }[];
    })[];
  }>(
    `select z.ref as "zoneRef", z.name as zone, i.name as initiator, i.place as "initiatorPlace",
            coalesce((select jsonb_agg(jsonb_build_object('name', s.name, 'result', r.result) order by s.roster_index, s.name)
              from string s left join lateral (
                select ts.result from shutdown_test_string ts join shutdown_test t on t.id = ts.test_id
                where ts.string_id = s.id order by t.at desc, t.id desc limit 1) r on true
              where s.zone_id = z.id), '[]') as per,
            n.test, n.signed,
            (select jsonb_build_object('ref', d.ref, 'startedAt', d.started_at, 'startedBy', p.name)
             from shutdown_test_draft d join person p on p.id = d.started_by
             where d.zone_id = z.id and d.closed_at is null) as draft
     from zone z join initiator i on i.id = z.initiator_id
     left join lateral (
       select jsonb_build_object('ref', t.ref, 'at', t.at, 'result', t.result, 'signedBy', t.made_by) as test,
              t.fingerprint is not null as signed
       from shutdown_test t where t.zone_id = z.id and t.superseded_by is null order by t.at desc, t.id desc limit 1) n on true
     where z.site_id = ? order by z.name`,
    [siteId],
  );
  return rows.map(({ zoneRef, zone, per, signed, ...r }) => {
    // a record from before tests were signed here speaks of its whole zone
    const earlier = r.test !== null && signed === false ? r.test.result : null;
    const results = per.map((s) => s.result ?? earlier);
    const known = results.filter((x) => x !== null);
    return {
      ...r,
      zone: { id: zoneRef, name: zone },
      strings: per.length,
      untested: per.flatMap((s, i) => (results[i] === null ? [s.name] : [])),
      result: known.length === 0 ? null : (WORST.find((w) => known.includes(w)) ?? null),
    };
  });
}

/** Every test of a site, signed, under way and ended, newest first. */
export async function testRows(tx: Tx, siteId: number): Promise<TestRow[]> {
  const { rows } = await tx.raw<{ rows: (Omit<TestRow, 'at'> & { at: Date })[] }>(
    `select t.ref as id, coalesce(z.name, 'no zone') as zone, 'signed' as state, t.at, t.made_by as by, t.result, t.strings::int,
            (select count(*)::int from shutdown_test_string s where s.test_id = t.id and s.result = 'failed') as failed,
            t.superseded_by is not null as superseded,
            (select count(*)::int from shutdown_test_string s where s.test_id = t.id and s.carried_from is not null) as carried,
            '' as reason, coalesce(t.fingerprint, '') as fingerprint
     from shutdown_test t left join zone z on z.id = t.zone_id where t.site_id = :siteId
     union all
     select d.ref, z.name, case when d.closed_at is null then 'draft' else 'ended' end, d.started_at, p.name, null, 0, 0, false, 0,
            coalesce(d.close_reason, ''), ''
     from shutdown_test_draft d join zone z on z.id = d.zone_id join person p on p.id = d.started_by
     where d.site_id = :siteId and not exists (select from shutdown_test t where t.draft_id = d.id)
     order by 4 desc`,
    { siteId },
  );
  return rows.map((r) => ({ ...r, at: r.at.toISOString() }));
}
