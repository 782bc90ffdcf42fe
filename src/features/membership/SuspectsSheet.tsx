import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { TimeChart } from '../../components/charts/TimeChart';
import type { SlotRef } from '../../components/placements/evidence';
import { groupsOf, suspectWords, unitName } from '../../components/placements/suspects';
import { withQuery } from '../../lib/api';
import type { MembershipPage, MembershipSuspect } from '../../schemas/api/membership';
import { paths } from '../../schemas/paths';
import { suspectModel } from './chart';
import { suspectsSheet } from '../../words/membership';

interface Props {
  page: MembershipPage;
  mayWrite: boolean;
  onReview: (first: SlotRef, second: SlotRef | null) => void;
  onIsolate: (stringId: string) => void;
}

const refOf = (s: { stringId: string; position: number }): SlotRef => ({
  stringId: s.stringId,
  position: s.position,
});

const KEYS = { rust: 'bg-rust', slate: 'bg-slate', petrol: 'bg-petrol' } as const;

/** Which line is whose. */
function Legend({ suspect: s }: { suspect: MembershipSuspect }) {
  const keys: { tone: keyof typeof KEYS; name: string }[] = [
    { tone: 'rust', name: unitName(s) },
    { tone: 'slate', name: suspectsSheet.itsString(s.string) },
  ];
  if (s.series.otherName) keys.push({ tone: 'petrol', name: s.series.otherName });
  return (
    <ul className="flex flex-wrap gap-x-4 text-sm">
      {keys.map((k) => (
        <li key={k.name} className="inline-flex items-center gap-1.5">
          <span aria-hidden="true" className={`h-[3px] w-4 ${KEYS[k.tone]}`} />
          {k.name}
        </li>
      ))}
    </ul>
  );
}

function Suspect({
  group,
  page,
  mayWrite,
  onReview,
  onIsolate,
  first,
}: Omit<Props, 'page'> & {
  group: [MembershipSuspect, MembershipSuspect?];
  page: MembershipPage;
  first: boolean;
}) {
  const [a, b] = group;
  const [shown, setShown] = useState(first);
  const elsewhere = a.outcome !== 'fits_none';
  return (
    <li className="border-b border-rule-faint py-4 first:pt-0 last:border-b-0 last:pb-0">
      <p className="max-w-[720px] text-[15px] leading-[22px]">{suspectWords(group)}</p>
      <div className="mt-2.5 flex flex-wrap gap-2">
        <Button onClick={() => setShown(!shown)} aria-expanded={shown}>
          {shown ? suspectsSheet.hideTheCurrents : suspectsSheet.seeTheCurrents}
        </Button>
        {elsewhere && mayWrite && (
          <Button
            onClick={() =>
              onReview(
                refOf(a),
                b ? refOf(b) : a.otherStringId ? { stringId: a.otherStringId, position: 0 } : null,
              )
            }
          >
            {suspectsSheet.reviewTheMove}
          </Button>
        )}
        {elsewhere && mayWrite && (
          <Button onClick={() => onIsolate(a.stringId)}>{suspectsSheet.isolateToBeCertain(a.string)}</Button>
        )}
      </div>
      {shown && (
        <div className="mt-4 grid gap-5">
          {[a, ...(b ? [b] : [])].map((s) => (
            <TimeChart
              key={s.serial}
              model={suspectModel(s, page.site.timeZone)}
              height={230}
              fileName={`current-${unitName(s)}`}
              controls={<Legend suspect={s} />}
            />
          ))}
        </div>
      )}
    </li>
  );
}

/** Units whose currents don't fit their string, with the evidence drawn. */
export function SuspectsSheet(props: Props) {
  const { page } = props;
  const { counts, window } = page;
  const groups = groupsOf(page.suspects);
  return (
    <Sheet
      id="suspects"
      title={suspectsSheet.wiredDifferentlyFromThe}
      flush
      aside={
        <a
          href={withQuery(paths.api.membershipCsv(page.site.id), { hours: window.hours })}
          download
          className="text-petrol hover:underline"
        >
          {suspectsSheet.everyUnitAsCsv}
        </a>
      }
    >
      {groups.length > 0 ? (
        <ul>
          {groups.map((group, i) => (
            <Suspect key={group[0].serial} {...props} group={group} first={i === 0} />
          ))}
        </ul>
      ) : (
        <Notice
          kind={counts.here > 0 ? 'done' : 'empty'}
          title={counts.here > 0 ? suspectsSheet.noUnitCarriesAnother : suspectsSheet.nothingCanBeTold}
        >
          {suspectsSheet.ofStepsOfMin(window.withCurrent, window.steps, window.stepS)}
        </Notice>
      )}
      {page.reasons.length > 0 && (
        <div className="mt-4 border-t border-rule-faint pt-3">
          <h3 className="mb-1 text-sm font-medium">{suspectsSheet.cantTellForUnits(counts.cantTell)}</h3>
          <ul className="grid gap-1 text-sm text-ink-2">
            {page.reasons.map((r) => (
              <li key={r.why}>
                {suspectsSheet.unitsInStrings8(r.units, r.strings.length, r.strings.join(', '), r.why)}
              </li>
            ))}
          </ul>
        </div>
      )}
      <p className="mt-4 text-sm text-ink-2">
        {suspectsSheet.unitsInSeriesCarry}
        <a href={paths.methods()} className="text-petrol hover:underline">
          {suspectsSheet.howItIsJudged}
        </a>
      </p>
    </Sheet>
  );
}
