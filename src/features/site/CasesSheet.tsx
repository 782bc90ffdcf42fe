import { memo } from 'react';
import { useQuery } from '@tanstack/react-query';
import { ButtonLink } from '../../components/ui/Button';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Tag } from '../../components/ui/Tag';
import { CASE_STATE_WORDS } from '../../words/domain-cases';
import { api } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import type { CaseItem } from '../../schemas/api/cases';
import { paths } from '../../schemas/paths';
import { casesSheet } from '../../words/site';

const EVERY_MS = 60_000;

/** The cases of this site that are not closed. */
export const CasesSheet = memo(function CasesSheet({
  site,
  initial,
}: {
  site: string;
  initial: readonly CaseItem[];
}) {
  const { data: cases, error } = useQuery(
    {
      queryKey: ['site-cases', site],
      queryFn: ({ signal }) => api<CaseItem[]>(paths.api.siteCases(site), { signal }),
      initialData: [...initial],
      refetchInterval: EVERY_MS,
    },
    queryClient(),
  );
  return (
    <Sheet id="cases" title={casesSheet.cases} aside={casesSheet.countedCasesCaseIs(cases.length)}>
      {error && (
        <div className="mb-3">
          <Notice kind="stale" title={casesSheet.theCasesCouldNot}>
            {error.message}
          </Notice>
        </div>
      )}
      {cases.length === 0 ? (
        <Notice kind="empty" title={casesSheet.nobodyWorksOnAnything} />
      ) : (
        <ul className="divide-y divide-rule-faint border-y border-rule-faint">
          {cases.map((c) => (
            <li key={c.id} className="flex flex-wrap items-center justify-between gap-x-4 gap-y-1 py-1.5">
              <a
                href={paths.caseFile(c.id)}
                className="target inline-flex min-w-0 items-center font-medium [overflow-wrap:anywhere] hover:underline"
              >
                <span>
                  <span className="text-ink-2">#{c.number}</span> {c.title}
                </span>
              </a>
              <span className="flex flex-wrap items-center gap-x-3 gap-y-1 text-sm text-ink-2">
                {c.strings.map((s) => s.name).join(', ')}
                {c.overdue && <Tag tone="rust">{casesSheet.overdue}</Tag>}
                <span>{CASE_STATE_WORDS[c.state].toLowerCase()}</span>
                <span>{c.assignee?.name ?? casesSheet.nobodyYet}</span>
              </span>
            </li>
          ))}
        </ul>
      )}
      <div className="no-print mt-3 flex flex-wrap gap-2">
        <ButtonLink href={paths.caseNew({ site })}>{casesSheet.openACase}</ButtonLink>
        <ButtonLink href={`${paths.cases()}?look=list&site=${site}&show=all`}>
          {casesSheet.allCasesOfThis}
        </ButtonLink>
      </div>
    </Sheet>
  );
});
