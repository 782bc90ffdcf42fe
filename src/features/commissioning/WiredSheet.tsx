import { useQuery } from '@tanstack/react-query';
import { groupsOf, suspectWords } from '../../components/placements/suspects';
import type { SlotRef } from '../../components/placements/evidence';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Sheet } from '../../components/ui/Sheet';
import { api } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import type { MembershipPage } from '../../schemas/api/membership';
import { paths } from '../../schemas/paths';
import { wiredSheet } from '../../words/commissioning';

interface Props {
  siteId: string;
  onReview: ((first: SlotRef | null, second: SlotRef | null) => void) | null;
  /** Another unit takes the place of one; null: the person may not change the as-built. */
  onReplace: (() => void) | null;
}

const SHOWN = 3;

/** Units whose current is another string's, in short; the evidence has a page of its own. */
export function WiredSheet({ siteId, onReview, onReplace }: Props) {
  const { data, error } = useQuery(
    {
      queryKey: ['membership', siteId, '6'],
      queryFn: ({ signal }) =>
        api<MembershipPage>(paths.api.membership(siteId), { query: { hours: 6 }, signal }),
      staleTime: 60_000,
      refetchInterval: 180_000,
    },
    queryClient(),
  );
  const groups = groupsOf((data?.suspects ?? []).filter((s) => s.outcome !== 'fits_none'));
  const counts = data?.counts;
  return (
    <Sheet id="wired" title={wiredSheet.wiredDifferentlyFromThe}>
      {groups.length > 0 ? (
        <ul className="grid gap-4">
          {groups.slice(0, SHOWN).map((group) => {
            const [a, b] = group;
            return (
              <li key={a.serial}>
                <p>{suspectWords(group)}</p>
                <div className="mt-2.5 flex flex-wrap gap-2">
                  <ButtonLink href={paths.membership(siteId)}>{wiredSheet.seeTheCurrents}</ButtonLink>
                  {onReview && (
                    <Button
                      onClick={() =>
                        onReview(
                          { stringId: a.stringId, position: a.position },
                          b
                            ? { stringId: b.stringId, position: b.position }
                            : a.otherStringId
                              ? { stringId: a.otherStringId, position: 0 }
                              : null,
                        )
                      }
                    >
                      {wiredSheet.reviewTheMove}
                    </Button>
                  )}
                </div>
              </li>
            );
          })}
        </ul>
      ) : (
        <>
          <p className="text-ink-2">
            {error
              ? wiredSheet.theCurrentsCouldNot(error.message)
              : !counts
                ? wiredSheet.comparingTheUnitsCurrents
                : counts.here > 0
                  ? wiredSheet.unitsCarryTheCurrent(counts.here, counts.cantTell)
                  : wiredSheet.itCantBeTold}
          </p>
          <div className="mt-2.5">
            <ButtonLink href={paths.membership(siteId)}>{wiredSheet.compareCurrentsOrIsolate}</ButtonLink>
          </div>
        </>
      )}
      {onReview && onReplace && (
        <div className="mt-4 border-t border-rule-faint pt-3">
          <p className="mb-2 text-sm text-ink-2">{wiredSheet.readOnTheRoof}</p>
          <div className="flex flex-wrap gap-2">
            <Button onClick={() => onReview(null, null)}>{wiredSheet.exchangeTwoSerials}</Button>
            <Button onClick={onReplace}>{wiredSheet.replaceAUnit}</Button>
          </div>
        </div>
      )}
    </Sheet>
  );
}
