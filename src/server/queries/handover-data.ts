import type { Tx } from '../db/transaction';

/** What the papers of a site say, read in one go as the database's own JSON. Shapes: server/reports/handover/data.ts. */

const SITE = `
  select jsonb_build_object('id', s.ref, 'name', s.name, 'place', s.place, 'latitude', s.latitude,
    'longitude', s.longitude, 'altitude', s.altitude, 'timeZone', s.time_zone, 'ruleSet', s.rule_set,
    'structure', s.structure, 'temperatureMin', s.temperature_min, 'temperatureMax', s.temperature_max,
    'switchPlace', s.shutdown_switch_place, 'contactName', s.contact_name, 'contactPhone', s.contact_phone,
    'createdAt', s.created_at, 'switchedOnOn', s.switched_on_on, 'outline', s.outline,
    'organisation', jsonb_build_object('name', o.name, 'phone', o.phone)) as data
  from site s join organisation o on o.id = s.organisation_id where s.id = :siteId`;

const list = (select: string): string =>
  `select coalesce(jsonb_agg(x order by n), '[]') as data from (${select}) q`;

const PARTS: Record<string, string> = {
  planes: list(
    `select jsonb_build_object('name', name, 'tilt', surface_tilt, 'azimuth', surface_azimuth) as x, name as n
     from plane where site_id = :siteId`,
  ),
  inverters: list(
    `select jsonb_build_object('name', i.name, 'type', t.name, 'acPowerMax', i.ac_power_max, 'inputs', (
       select coalesce(jsonb_agg(jsonb_build_object('number', p.number, 'strings', (
         select coalesce(jsonb_agg(st.name order by st.name), '[]') from string st where st.input_id = p.id))
         order by p.number), '[]') from input p where p.inverter_id = i.id)) as x, i.name as n
     from inverter i left join inverter_type t on t.id = i.inverter_type_id where i.site_id = :siteId`,
  ),
  zones: list(
    `select jsonb_build_object('name', z.name, 'initiator', i.name, 'place', i.place,
       'strings', (select coalesce(jsonb_agg(st.name order by st.name), '[]') from string st where st.zone_id = z.id),
       'transmitters', (select coalesce(jsonb_agg(jsonb_build_object('name', t.name, 'strings', (
          select coalesce(jsonb_agg(st.name order by st.name), '[]') from transmitter_string ts join string st on st.id = ts.string_id
          where ts.transmitter_id = t.id)) order by t.name), '[]') from transmitter t where t.zone_id = z.id)) as x, z.name as n
     from zone z join initiator i on i.id = z.initiator_id where z.site_id = :siteId`,
  ),
  loggers: list(
    `select jsonb_build_object('serial', l.serial, 'firmware', l.firmware, 'gateways', (
       select coalesce(jsonb_agg(g.name order by g.number), '[]') from gateway g where g.logger_id = l.id)) as x, l.serial as n
     from logger l where l.site_id = :siteId`,
  ),
  strings: list(
    `select jsonb_build_object('id', st.ref, 'name', st.name, 'plane', p.name, 'kind', st.kind, 'unitType', t.name, 'inverter', v.name,
       'input', i.number, 'zone', z.name, 'logger', l.serial, 'leavesArray', st.home_run_leaves_array,
       'cableResistance', st.cable_resistance,
       'transmitters', (select coalesce(jsonb_agg(tr.name order by tr.name), '[]') from transmitter_string ts
          join transmitter tr on tr.id = ts.transmitter_id where ts.string_id = st.id),
       'slots', (select coalesce(jsonb_agg(jsonb_build_object('position', sl.position, 'serial', u.serial,
          'moduleType', m.name, 'place', sl.roof_place, 'x', sl.roof_x, 'y', sl.roof_y) order by sl.position), '[]')
         from slot sl join module_type m on m.id = sl.module_type_id
         left join placement pl on pl.slot_id = sl.id and pl.placed_to is null left join unit u on u.id = pl.unit_id
         where sl.string_id = st.id)) as x, lpad(st.name, 40) as n
     from string st join plane p on p.id = st.plane_id join unit_type t on t.id = st.unit_type_id
     join input i on i.id = st.input_id join inverter v on v.id = i.inverter_id join zone z on z.id = st.zone_id
     left join logger l on l.id = st.logger_id where st.site_id = :siteId`,
  ),
  moduleTypes: list(
    `select to_jsonb(m) - 'id' - 'organisation_id' - 'archived_at' as x, m.name as n from module_type m
     where exists (select from slot where slot.site_id = :siteId and slot.module_type_id = m.id)`,
  ),
  unitTypes: list(
    `select to_jsonb(t) - 'id' - 'organisation_id' - 'archived_at' as x, t.name as n from unit_type t
     where exists (select from string st where st.site_id = :siteId and st.unit_type_id = t.id)`,
  ),
  inverterTypes: list(
    `select to_jsonb(t) - 'id' - 'organisation_id' - 'archived_at' as x, t.name as n from inverter_type t
     where exists (select from inverter i where i.site_id = :siteId and i.inverter_type_id = t.id)`,
  ),
  connectorTypes: list(
    `select jsonb_build_object('id', c.ref, 'name', c.name, 'maker', c.maker, 'family', c.family,
       'voltageMax', c.voltage_max, 'currentMax', c.current_max) as x, c.name as n from connector_type c
     where exists (select from install_check k where k.site_id = :siteId and k.figures::text like '%' || c.ref::text || '%')
        or c.id in (select connector_type_id from module_type m where exists (
             select from slot where slot.site_id = :siteId and slot.module_type_id = m.id))
        or exists (select from unit_type t join string st on st.unit_type_id = t.id where st.site_id = :siteId
             and c.id in (t.connector_in_id, t.connector_out_id))`,
  ),
  checks: list(
    `select jsonb_build_object('ref', k.ref, 'string', st.name, 'check', k.check_name, 'result', k.result, 'reason', k.reason,
       'note', k.note, 'figures', k.figures, 'person', person.name, 'at', k.at) as x, lpad(st.name, 40) || k.check_name as n
     from install_check k join string st on st.id = k.string_id join person on person.id = k.person_id
     where k.site_id = :siteId and not exists (select from install_check later where later.supersedes = k.id)`,
  ),
  signOffs: list(
    `select jsonb_build_object('string', st.name, 'person', person.name, 'at', s.at, 'stale',
       exists (select from install_check k where k.string_id = s.string_id and k.recorded_at > s.at)) as x, lpad(st.name, 40) as n
     from (select distinct on (string_id) * from string_sign_off where site_id = :siteId order by string_id, at desc) s
     join string st on st.id = s.string_id join person on person.id = s.person_id`,
  ),
  readings: list(
    `select jsonb_build_object('ref', r.ref, 'string', st.name, 'stage', r.stage, 'kind', r.reading_kind, 'light', r.light,
       'voltage', r.voltage, 'note', r.note, 'finding', r.findings, 'person', person.name, 'at', r.at) as x,
       lpad(st.name, 40) || r.stage || r.reading_kind as n
     from (select distinct on (string_id, stage, reading_kind) * from meter_reading where site_id = :siteId
           order by string_id, stage, reading_kind, id desc) r
     join string st on st.id = r.string_id join person on person.id = r.person_id`,
  ),
  rollCalls: list(
    `select jsonb_build_object('startedAt', r.started_at, 'stoppedAt', r.stopped_at, 'personOnSite', r.person_on_site,
       'startedBy', person.name) as x, r.started_at as n
     from roll_call r join person on person.id = r.started_by where r.site_id = :siteId`,
  ),
  heard: list(
    `select jsonb_build_object('string', st.name, 'roster', count(pl.id), 'heard', count(h.serial), 'weakest', min(h.signal)) as x,
       lpad(st.name, 40) as n
     from string st join slot sl on sl.string_id = st.id left join placement pl on pl.slot_id = sl.id and pl.placed_to is null
     left join heard h on h.unit_id = pl.unit_id and h.site_id = st.site_id
     where st.site_id = :siteId and st.kind <> 'shutdown_only' group by st.id`,
  ),
  heardUnknown: list(
    `select to_jsonb(h.serial) as x, h.serial as n from heard h where h.site_id = :siteId and not exists (
       select from placement pl where pl.unit_id = h.unit_id and pl.placed_to is null and pl.site_id = :siteId)`,
  ),
  tests: list(
    `select jsonb_build_object('ref', t.ref, 'zone', z.name, 'at', t.at, 'madeBy', t.made_by, 'result', t.result,
       'superseded', t.superseded_by is not null) as x, t.at as n
     from shutdown_test t left join zone z on z.id = t.zone_id where t.site_id = :siteId`,
  ),
  gaps: list(
    `select jsonb_build_object('step', g.step, 'gap', g.gap, 'words', g.words, 'reason', g.reason, 'person', person.name, 'at', g.at) as x, g.at as n
     from accepted_gap g join person on person.id = g.person_id where g.site_id = :siteId`,
  ),
  photos: list(
    `select jsonb_build_object('ref', a.ref, 'string', st.name, 'subject', a.subject, 'subjectRef', a.subject_ref, 'name', a.name,
       'note', a.note, 'person', person.name, 'at', a.at, 'sha256', encode(a.sha256, 'hex')) as x, a.at as n
     from attachment a left join string st on st.id = a.string_id left join person on person.id = a.person_id
     where a.site_id = :siteId and a.media_type like 'image/%'`,
  ),
  people: list(
    `select jsonb_build_object('name', person.name, 'role', person.role, 'did', array_agg(distinct done.what order by done.what)) as x, person.name as n
     from (select person_id, 'install checks' as what from install_check where site_id = :siteId
           union select person_id, 'sign-off' from string_sign_off where site_id = :siteId
           union select person_id, 'meter readings' from meter_reading where site_id = :siteId
           union select started_by, 'roll call' from roll_call where site_id = :siteId
           union select person_id, 'as-built' from audit_entry where site_id = :siteId and action like 'as\\_built.%'
           union select person_id, 'accepted gaps' from accepted_gap where site_id = :siteId) done
     join person on person.id = done.person_id group by person.id`,
  ),
};

/** Parts by name; `site` is one object, the others are lists. */
export async function handoverRows(tx: Tx, siteId: number): Promise<Record<string, unknown>> {
  const names = Object.keys(PARTS);
  const { rows } = await tx.raw<{ rows: Record<string, unknown>[] }>(
    `select (${SITE}) as site, ${names.map((name) => `(${PARTS[name] ?? ''}) as "${name}"`).join(', ')}`,
    { siteId },
  );
  return rows[0] ?? {};
}

/** The small pictures of photos, by public identifier. */
export async function thumbnailsOf(tx: Tx, siteId: number): Promise<Map<string, Buffer>> {
  const { rows } = await tx.raw<{ rows: { ref: string; data: Buffer }[] }>(
    `select a.ref, d.data from attachment a join attachment_data d on d.attachment_id = a.id and d.variant = 'thumbnail'
     where a.site_id = ? and a.media_type like 'image/%'`,
    [siteId],
  );
  return new Map(rows.map((r) => [r.ref, r.data]));
}
