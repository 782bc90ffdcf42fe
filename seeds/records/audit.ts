import type { Knex } from 'knex';
import { known } from '../plant/rows';
import type { SeededPlant } from '../plant/seeded';

const DAY_S = 86_400;
const MANAGER = 'manager@lowfield.example';
const FROM = '127.0.0.1';

interface Entry {
  at: number;
  by: string;
  action: string;
  subject: string;
  before?: object;
  after?: object;
  site?: number;
}

/** What the demo's people did before it begins, as the record of it would have been written: letting in, cases, settings. */
export async function seedAudit(tx: Knex.Transaction, plant: SeededPlant, since: number): Promise<void> {
  const day = (days: number, hour = 0) => since - days * DAY_S + hour * 3600;
  const people = await tx<{ email: string; name: string; role: string; organisation_id: number }>('person')
    .whereLike('email', '%@lowfield.example')
    .orderBy('id')
    .select('email', 'name', 'role', 'organisation_id');
  const organisation = people[0]?.organisation_id;
  if (organisation === undefined) throw new Error('The demo has no people of its first organisation.');
  const entries: Entry[] = [];
  people
    .filter((p) => p.email !== MANAGER)
    .forEach(({ email, name, role }, i) =>
      entries.push(
        {
          at: day(410 - i, 1),
          by: MANAGER,
          action: 'people.invited',
          subject: `invitation of ${email}`,
          after: { email, name, role },
        },
        {
          at: day(409 - i, 3),
          by: email,
          action: 'people.joined',
          subject: `invitation of ${email}`,
          after: { role },
        },
      ),
    );
  entries.push({
    at: day(402),
    by: MANAGER,
    action: 'settings.organisation',
    subject: 'organisation',
    before: { phone: null },
    after: { phone: '+00 555 0100' },
  });
  const cases = await tx('case_file as c')
    .join('person as p', 'p.id', 'c.opened_by')
    .where('c.organisation_id', organisation)
    .orderBy('c.id')
    .select<
      {
        ref: string;
        number: number;
        title: string;
        site: number;
        opened: Date;
        by: string;
        closed: Date | null;
      }[]
    >({
      ref: 'c.ref',
      number: 'c.number',
      title: 'c.title',
      site: 'c.site_id',
      opened: 'c.opened_at',
      by: 'p.email',
      closed: 'c.closed_at',
    });
  for (const c of cases) {
    const subject = `case ${c.ref}`;
    entries.push({
      at: c.opened.getTime() / 1000,
      by: c.by,
      action: 'case.opened',
      subject,
      after: { number: c.number, title: c.title },
      site: c.site,
    });
    if (c.closed)
      entries.push({
        at: c.closed.getTime() / 1000,
        by: c.by,
        action: 'case.closed',
        subject,
        before: { state: 'open' },
        after: { state: 'done' },
        site: c.site,
      });
  }
  const rows = entries
    .sort((a, b) => a.at - b.at)
    .map((e) => ({
      organisation_id: organisation,
      person_id: known(plant.people, e.by, 'person').id,
      at: new Date(e.at * 1000),
      address: FROM,
      action: e.action,
      subject: e.subject,
      before: e.before ?? null,
      after: e.after ?? null,
      site_id: e.site ?? null,
    }));
  await tx('audit_entry').insert(rows);
}
