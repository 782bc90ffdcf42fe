import type { OrganisationBody, Units } from '../../schemas/api/settings';
import type { Tx } from '../db/transaction';

/** What an organisation set for itself; the actor's own and no other. */

export interface OrganisationRow {
  id: number;
  name: string;
  phone: string;
  timeZone: string;
  currency: string | null;
  units: Units;
  hideRawAfterDays: number | null;
  thresholds: unknown;
  logo: string | null;
  sites: number;
}

export async function organisationRow(tx: Tx, lock = false): Promise<OrganisationRow | undefined> {
  const { rows } = await tx.raw<{ rows: OrganisationRow[] }>(
    `select o.id, o.name, coalesce(o.phone, '') as phone, o.time_zone as "timeZone", o.currency, o.units,
            o.hide_raw_after_days as "hideRawAfterDays", o.thresholds,
            (select a.ref::text from attachment a where a.id = o.logo_id) as logo,
            (select count(*)::int from site where site.organisation_id = o.id) as sites
     from organisation o where o.id = (select actor_organisation()) ${lock ? 'for update of o' : ''}`,
  );
  return rows[0];
}

export const updateOrganisation = (tx: Tx, id: number, body: OrganisationBody): Promise<number> =>
  tx('organisation')
    .where({ id })
    .update({
      name: body.name,
      phone: body.phone === '' ? null : body.phone,
      time_zone: body.timeZone,
      currency: body.currency,
      units: body.units,
      hide_raw_after_days: body.hideRawAfterDays,
    });

export const updateThresholds = (tx: Tx, id: number, thresholds: object): Promise<number> =>
  tx('organisation')
    .where({ id })
    .update({ thresholds: JSON.stringify(thresholds) });

export const setLogo = (tx: Tx, id: number, attachmentRef: string | null): Promise<number> =>
  tx('organisation')
    .where({ id })
    .update({
      logo_id: attachmentRef === null ? null : tx('attachment').select('id').where({ ref: attachmentRef }),
    });

export async function organisationSiteIds(tx: Tx): Promise<number[]> {
  const { rows } = await tx.raw<{ rows: { id: number }[] }>(
    'select id from site where organisation_id = (select actor_organisation()) order by id',
  );
  return rows.map((r) => r.id);
}

export async function logoBytes(tx: Tx): Promise<{ ref: string; data: Buffer } | undefined> {
  const { rows } = await tx.raw<{ rows: { ref: string; data: Buffer }[] }>(
    `select a.ref::text as ref, d.data from organisation o join attachment a on a.id = o.logo_id
       join attachment_data d on d.attachment_id = a.id and d.variant = 'full'
     where o.id = (select actor_organisation())`,
  );
  return rows[0];
}
