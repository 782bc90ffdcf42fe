import { randomUUID } from 'node:crypto';
import type { Knex } from 'knex';
import { known } from '../plant/rows';
import type { SeededPlant } from '../plant/seeded';

/** What people were working on before the demo begins: one case waits, one is new from a customer, one is done. */

const DAY_S = 86_400;
const MANAGER = 'manager@lowfield.example';
const TECHNICIAN = 'technician@lowfield.example';
const ANALYST = 'analyst@lowfield.example';
const CUSTOMER = 'customer@lowfield.example';

interface Said {
  by: string;
  daysAgo: number;
  kind: 'opened' | 'comment';
  body: string;
}
interface CasePlan {
  site: string;
  string?: string;
  title: string;
  what: string;
  kind: string;
  origin: 'string' | 'hand' | 'customer';
  state: 'open' | 'waiting' | 'done';
  assignee: string | null;
  dueInDays: number | null;
  closedDaysAgo?: number;
  said: readonly [Said, ...Said[]];
}

const CASES: readonly CasePlan[] = [
  {
    site: 'Slate Lane Library',
    string: 'A1',
    title: 'A1 makes less in the morning than its neighbours',
    what: 'From about nine to eleven, every clear day, since the scaffolding next door went up.',
    kind: 'low_output',
    origin: 'string',
    state: 'done',
    assignee: ANALYST,
    dueInDays: null,
    closedDaysAgo: 9,
    said: [
      { by: ANALYST, daysAgo: 16, kind: 'opened', body: '' },
      {
        by: TECHNICIAN,
        daysAgo: 10,
        kind: 'comment',
        body: 'Scaffolding is down. Nothing else stands in the sun.',
      },
    ],
  },
  {
    site: 'Coopers Wharf Gallery',
    title: 'Label of the shutdown switch can’t be read any more',
    what: 'Seen from the pavement: the sun has bleached it. A new one has to go up before the next inspection.',
    kind: 'other',
    origin: 'hand',
    state: 'waiting',
    assignee: TECHNICIAN,
    dueInDays: 6,
    said: [
      { by: MANAGER, daysAgo: 5, kind: 'opened', body: '' },
      {
        by: TECHNICIAN,
        daysAgo: 3,
        kind: 'comment',
        body: 'Labels are ordered; the reflective kind this time.',
      },
    ],
  },
  {
    site: 'Weirside Clinic',
    title: 'Reported: The inverter hums louder than it used to',
    what: 'The inverter hums louder than it used to, mostly around noon. Is that as it should be?',
    kind: 'other',
    origin: 'customer',
    state: 'open',
    assignee: null,
    dueInDays: null,
    said: [{ by: CUSTOMER, daysAgo: 1, kind: 'opened', body: '' }],
  },
];

export async function seedCases(tx: Knex.Transaction, plant: SeededPlant, sinceS: number): Promise<void> {
  const at = (daysAgo: number): string => new Date((sinceS - daysAgo * DAY_S) * 1000).toISOString();
  const person = (email: string): number => known(plant.people, email, 'the person').id;
  let number = 0;
  for (const plan of CASES) {
    const site = plant.sites.get(plan.site);
    if (!site) continue;
    number += 1;
    const string = plan.string === undefined ? undefined : known(site.strings, plan.string, 'the string');
    const closed = plan.closedDaysAgo === undefined ? null : at(plan.closedDaysAgo);
    const assignee = plan.assignee === null ? null : person(plan.assignee);
    const [made] = await tx('case_file')
      .insert({
        ref: randomUUID(),
        site_id: site.id,
        number,
        organisation_id: site.organisationId,
        title: plan.title,
        what: plan.what,
        kind: plan.kind,
        origin: plan.origin,
        string_ids: string ? [string.id] : [],
        state: plan.state,
        assignee_id: assignee,
        due_on: plan.dueInDays === null ? null : at(-plan.dueInDays).slice(0, 10),
        opened_by: person(plan.said[0].by),
        opened_at: at(plan.said[0].daysAgo),
        changed_at: closed ?? at(plan.said[plan.said.length - 1]?.daysAgo ?? 0),
        closed_at: closed,
        closed_by: closed === null ? null : assignee,
        checked_at: closed, // looked at again before the demo begins
      })
      .returning<{ id: number }[]>('id');
    if (!made) throw new Error(`The case "${plan.title}" was not written.`);
    await tx('case_entry').insert(
      plan.said.map((s) => ({
        case_id: made.id,
        site_id: site.id,
        at: at(s.daysAgo),
        person_id: person(s.by),
        kind: s.kind,
        body: s.body,
        detail: JSON.stringify({}),
      })),
    );
  }
}
