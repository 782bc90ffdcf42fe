import {
  CASE_KIND_WORDS,
  CASE_ORIGIN_WORDS,
  CASE_STATE_WORDS,
  CHECK_OUTCOME_WORDS,
} from '../../words/domain-cases';
import { listedCases } from '../../features/cases/list';
import { casesView } from '../../schemas/api/cases';
import { endpoint } from '../../server/http/endpoint';
import { csvResponse } from '../../server/reports/csv';
import { casesPage } from '../../server/services/cases';

export const GET = endpoint({ permission: 'case.read', query: casesView }, async ({ tx, actor, query }) => {
  const page = await casesPage(tx, actor, query.show, new Date());
  return csvResponse(
    'cases',
    [
      { header: 'number', value: (c) => c.number },
      { header: 'title', value: (c) => c.title },
      { header: 'site', value: (c) => c.siteName },
      { header: 'strings', value: (c) => c.strings.map((s) => s.name).join('; ') },
      { header: 'units', value: (c) => c.units },
      { header: 'kind', value: (c) => CASE_KIND_WORDS[c.kind] },
      { header: 'origin', value: (c) => CASE_ORIGIN_WORDS[c.origin] },
      { header: 'state', value: (c) => CASE_STATE_WORDS[c.state] },
      { header: 'assigned to', value: (c) => c.assignee?.name },
      { header: 'due', value: (c) => c.dueOn },
      { header: 'overdue', value: (c) => c.overdue },
      { header: 'opened by', value: (c) => c.openedBy },
      { header: 'opened (UTC)', value: (c) => new Date(c.openedAt) },
      { header: 'changed (UTC)', value: (c) => new Date(c.changedAt) },
      { header: 'closed (UTC)', value: (c) => c.closedAt && new Date(c.closedAt) },
      { header: 'looked at again', value: (c) => c.outcome && CHECK_OUTCOME_WORDS[c.outcome] },
    ],
    listedCases(page.cases, query, page.me),
  );
});
