import type pg from 'pg';
import type { SeededSite } from '../../seeds/plant/seeded';
import type { Role } from '../../src/domain/access/permissions';
import { newToken } from '../../src/server/auth/secret-link';

export interface Shown {
  name: string;
  role: Role | null;
  path: () => string;
  /** Of which file under src/pages. */
  file: string;
  status?: number;
}

const CAUSE = '00000000-0000-4000-8000-00000000c001';
const CASE = '00000000-0000-4000-8000-00000000c002';
const WEBHOOK = '00000000-0000-4000-8000-00000000c003';

/** A cause, a case and a webhook, so that their pages have something to show. */
export async function standWatched(owner: pg.Client | pg.Pool, site: SeededSite): Promise<void> {
  await owner.query(
    `insert into cause (ref, site_id, key, kind, headline, evidence, confidence, units, string_ids, since, opened_at, changed_at)
     values ($1, $2, 'stuck:page', 'stuck', 'Two units of A1 are stuck in shutdown', 'Both claim shutdown while the keep-alive stands.',
       0.9, '[]', $3, now() - interval '2 hours', now() - interval '1 hour', now())`,
    [CAUSE, site.id, [site.strings.get('A1')?.id ?? 0]],
  );
  await owner.query(
    `insert into case_file (ref, site_id, number, organisation_id, title, what, kind, origin, opened_by)
     select $1, s.id, 1, s.organisation_id, 'Two units of A1 are stuck', 'Since the storm.', 'stuck', 'hand', p.id
     from site s join person p on p.organisation_id = s.organisation_id and p.role = 'manager' where s.id = $2 limit 1`,
    [CASE, site.id],
  );
  await owner.query(
    `insert into webhook (ref, organisation_id, name, url, secret, kinds, created_by)
     select $1, p.organisation_id, 'Desk', 'https://desk.example/calls', 'x', '{hazard}', p.id
     from person p join site s on s.organisation_id = p.organisation_id where p.role = 'manager' and s.id = $2 limit 1`,
    [WEBHOOK, site.id],
  );
}

/** Pages of years of watching: causes, cases, notices, jobs, webhooks, planned works. */
export const watchedPages = (site: () => string): readonly Shown[] => [
  { name: 'causes', role: 'analyst', path: () => '/causes', file: 'causes/index.astro' },
  { name: 'a cause', role: 'analyst', path: () => `/causes/${CAUSE}`, file: 'causes/[cause].astro' },
  { name: 'cases', role: 'analyst', path: () => '/cases', file: 'cases/index.astro' },
  { name: 'cases as a list', role: 'analyst', path: () => '/cases?look=list', file: 'cases/index.astro' },
  { name: 'a new case', role: 'analyst', path: () => `/cases/new?cause=${CAUSE}`, file: 'cases/new.astro' },
  { name: 'a case', role: 'analyst', path: () => `/cases/${CASE}`, file: 'cases/[case].astro' },
  { name: 'background jobs', role: 'manager', path: () => '/jobs', file: 'jobs.astro' },
  { name: 'notices', role: 'analyst', path: () => '/notices', file: 'notices.astro' },
  {
    name: 'what one is told of',
    role: 'analyst',
    path: () => '/account/notices',
    file: 'account/notices.astro',
  },
  {
    name: 'a way out of letters that is none',
    role: null,
    path: () => `/unsubscribe/${newToken()}`,
    file: 'unsubscribe/[token].astro',
    status: 404,
  },
  { name: 'webhooks', role: 'manager', path: () => '/webhooks', file: 'webhooks/index.astro' },
  {
    name: 'a webhook',
    role: 'manager',
    path: () => `/webhooks/${WEBHOOK}`,
    file: 'webhooks/[webhook].astro',
  },
  {
    name: 'planned works',
    role: 'technician',
    path: () => `/sites/${site()}/planned-works`,
    file: 'sites/[site]/planned-works.astro',
  },
];
