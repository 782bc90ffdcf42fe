import { listedPeople } from '../../features/people/list';
import { peopleView } from '../../schemas/api/people';
import { endpoint } from '../../server/http/endpoint';
import { csvResponse } from '../../server/reports/csv';
import { peoplePage } from '../../server/services/people';

export const GET = endpoint(
  { permission: 'people.manage', query: peopleView },
  async ({ tx, actor, query }) => {
    const page = await peoplePage(tx, actor, new Date());
    const names = new Map(page.sites.map((s) => [s.id, s.name]));
    return csvResponse(
      'people',
      [
        { header: 'name', value: (p) => p.name },
        { header: 'e-mail', value: (p) => p.email },
        { header: 'role', value: (p) => p.role },
        { header: 'may sign in', value: (p) => p.active },
        { header: 'second factor', value: (p) => p.secondFactor },
        { header: 'last seen (UTC)', value: (p) => p.lastSeenAt && new Date(p.lastSeenAt) },
        {
          header: 'sites',
          value: (p) => (p.role === 'customer' ? p.sites.map((s) => names.get(s) ?? '').join('; ') : 'all'),
        },
      ],
      listedPeople(page.people, query),
    );
  },
);
