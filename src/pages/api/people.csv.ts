import { listedPeople } from '../../features/people/list';
import { peopleView } from '../../schemas/api/people';
import { endpoint } from '../../server/http/endpoint';
import { csvResponse } from '../../server/reports/csv';
import { peoplePage } from '../../server/services/people';
import { peopleHeads } from '../../words/csv-heads';

export const GET = endpoint(
  { permission: 'people.manage', query: peopleView },
  async ({ tx, actor, query }) => {
    const page = await peoplePage(tx, actor, new Date());
    const names = new Map(page.sites.map((s) => [s.id, s.name]));
    return csvResponse(
      'people',
      [
        { header: peopleHeads.name, value: (p) => p.name },
        { header: peopleHeads.eMail, value: (p) => p.email },
        { header: peopleHeads.role, value: (p) => p.role },
        { header: peopleHeads.maySignIn, value: (p) => p.active },
        { header: peopleHeads.secondFactor, value: (p) => p.secondFactor },
        { header: peopleHeads.lastSeenUtc, value: (p) => p.lastSeenAt && new Date(p.lastSeenAt) },
        {
          header: peopleHeads.sites,
          value: (p) =>
            p.role === 'customer' ? p.sites.map((s) => names.get(s) ?? '').join('; ') : peopleHeads.allSites,
        },
      ],
      listedPeople(page.people, query),
    );
  },
);
