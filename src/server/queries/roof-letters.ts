import type { Every } from '../../domain/output/letter-period';
import type { Tx } from '../db/transaction';

/** Letters about a roof that people asked for. */

export async function letterAsked(tx: Tx, siteId: number, personId: number): Promise<Every | null> {
  const row = await tx('roof_letter')
    .where({ site_id: siteId, person_id: personId })
    .first<{ every: Every }>('every');
  return row?.every ?? null;
}

/** @param lastPeriod the period that is over already: the first letter is about the next one */
export async function askForLetter(
  tx: Tx,
  asked: { siteId: number; personId: number; every: Every; lastPeriod: string },
): Promise<void> {
  await tx('roof_letter')
    .insert({
      site_id: asked.siteId,
      person_id: asked.personId,
      every: asked.every,
      last_period: asked.lastPeriod,
    })
    .onConflict(['person_id', 'site_id'])
    .merge(['every', 'last_period']);
}

export const endLetter = (tx: Tx, siteId: number, personId: number): Promise<number> =>
  tx('roof_letter').where({ site_id: siteId, person_id: personId }).delete();

export interface AskedLetter {
  personId: number;
  personRef: string;
  personName: string;
  email: string;
  organisationId: number;
  organisation: string;
  phone: string | null;
  currency: string | null;
  siteId: number;
  siteRef: string;
  siteName: string;
  switchedOnOn: string | null;
  every: Every;
  lastPeriod: string;
  /** The calendar and the clock at the site. */
  today: string;
  hour: number;
}

/** Every letter that somebody asked for and may still have: an active person who sees the site. */
export async function askedLetters(tx: Tx, at: Date): Promise<AskedLetter[]> {
  const { rows } = await tx.raw<{ rows: AskedLetter[] }>(
    `select p.id as "personId", p.ref as "personRef", p.name as "personName", p.email, o.id as "organisationId", o.name as organisation,
            o.phone, o.currency, site.id as "siteId", site.ref as "siteRef", site.name as "siteName",
            site.switched_on_on::text as "switchedOnOn", l.every, l.last_period as "lastPeriod",
            (cast(:at as timestamptz) at time zone site.time_zone)::date::text as today,
            extract(hour from cast(:at as timestamptz) at time zone site.time_zone)::int as hour
     from roof_letter l join person p on p.id = l.person_id join site on site.id = l.site_id
       join organisation o on o.id = site.organisation_id and o.id = p.organisation_id
     where p.active and (p.role <> 'customer' or exists (
       select from site_access a where a.person_id = p.id and a.site_id = site.id))
     order by p.id, site.id`,
    { at },
  );
  return rows;
}

/** Takes the turn of one letter; false where another worker has it, or it was written. */
export async function takeLetterTurn(
  tx: Tx,
  letter: Pick<AskedLetter, 'personId' | 'siteId' | 'lastPeriod'>,
  period: string,
): Promise<boolean> {
  const { rows } = await tx.raw<{ rows: unknown[] }>(
    `update roof_letter set last_period = :period
     where (person_id, site_id) in (select person_id, site_id from roof_letter
       where person_id = :personId and site_id = :siteId and last_period = :lastPeriod for update skip locked)
     returning person_id`,
    { ...letter, period },
  );
  return rows.length > 0;
}
