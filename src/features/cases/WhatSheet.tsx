import { Suspense } from 'react';
import { Sheet } from '../../components/ui/Sheet';
import type { CasePage } from '../../schemas/api/cases';
import { late } from '../../lib/late';
import { paths } from '../../schemas/paths';
import type { CaseInHand } from './query';
import { whatSheet } from '../../words/cases';

const WhatForm = late(async () => (await import('./WhatForm')).WhatForm);

/** What is wrong and which parts it is about. */
export function WhatSheet({
  hand,
  editing,
  onEdit,
}: {
  hand: CaseInHand;
  editing: boolean;
  onEdit: (on: boolean) => void;
}) {
  const c = hand.page.case;
  return (
    <Sheet
      id="what"
      title={whatSheet.whatIsWrong}
      aside={
        !editing && (
          <button
            type="button"
            className="target -my-3 text-petrol underline underline-offset-[3px]"
            onClick={() => onEdit(true)}
          >
            {whatSheet.change}
          </button>
        )
      }
    >
      {editing ? (
        <Suspense>
          <WhatForm hand={hand} onDone={() => onEdit(false)} />
        </Suspense>
      ) : c.what ? (
        <p className="max-w-[70ch] whitespace-pre-wrap text-[16px] leading-6 [overflow-wrap:anywhere]">
          {c.what}
        </p>
      ) : (
        <p className="text-ink-2">{whatSheet.nothingIsWrittenDown}</p>
      )}
      {!editing && <Parts page={hand.page} />}
    </Sheet>
  );
}

function Parts({ page }: { page: CasePage }) {
  const { strings, siteId, parts } = page.case;
  if (strings.length === 0) return <p className="mt-4 text-sm text-ink-2">{whatSheet.noStringIsNamed}</p>;
  return (
    <ul className="mt-4 divide-y divide-rule-faint border-t border-rule-faint">
      {strings.map((s) => {
        const units = parts
          .filter((p) => p.stringId === s.id && p.position !== null)
          .sort((a, b) => (a.position ?? 0) - (b.position ?? 0));
        return (
          <li key={s.id} className="flex flex-wrap items-baseline gap-x-4 gap-y-1 py-1.5">
            <a
              href={paths.string(siteId, s.id)}
              className="target inline-flex items-center font-medium text-petrol underline underline-offset-[3px]"
            >
              {whatSheet.stringName(s.name)}
            </a>
            {units.length === 0 ? (
              <span className="text-ink-2">{whatSheet.theWholeString}</span>
            ) : (
              <ul className="flex flex-wrap gap-x-4 gap-y-1">
                {units.map((u) => (
                  <li key={u.position}>
                    <a
                      href={`${paths.string(siteId, s.id)}#units`}
                      className="target inline-flex items-center hover:underline"
                    >
                      {whatSheet.position}
                      {u.position}
                      {u.serial && <span className="ml-1.5 text-sm text-ink-2">{u.serial}</span>}
                    </a>
                  </li>
                ))}
              </ul>
            )}
          </li>
        );
      })}
    </ul>
  );
}
