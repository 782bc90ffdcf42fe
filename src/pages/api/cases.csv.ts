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
import { caseHeads } from '../../words/csv-heads';

export const GET = endpoint({ permission: 'case.read', query: casesView }, async ({ tx, actor, query }) => {
  const page = await casesPage(tx, actor, query.show, new Date());
  return csvResponse(
    'cases',
    [
      { header: caseHeads.number, value: (c) => c.number },
      { header: caseHeads.title, value: (c) => c.title },
      { header: caseHeads.site, value: (c) => c.siteName },
      { header: caseHeads.strings, value: (c) => c.strings.map((s) => s.name).join('; ') },
      { header: caseHeads.units, value: (c) => c.units },
      { header: caseHeads.kind, value: (c) => CASE_KIND_WORDS[c.kind] },
      { header: caseHeads.origin, value: (c) => CASE_ORIGIN_WORDS[c.origin] },
      { header: caseHeads.state, value: (c) => CASE_STATE_WORDS[c.state] },
      { header: caseHeads.assignedTo, value: (c) => c.assignee?.name },
      { header: caseHeads.due, value: (c) => c.dueOn },
      { header: caseHeads.overdue, value: (c) => c.overdue },
      { header: caseHeads.openedBy, value: (c) => c.openedBy },
      { header: caseHeads.openedUtc, value: (c) => new Date(c.openedAt) },
      { header: caseHeads.changedUtc, value: (c) => new Date(c.changedAt) },
      { header: caseHeads.closedUtc, value: (c) => c.closedAt && new Date(c.closedAt) },
      { header: caseHeads.lookedAtAgain, value: (c) => c.outcome && CHECK_OUTCOME_WORDS[c.outcome] },
    ],
    listedCases(page.cases, query, page.me),
  );
});
