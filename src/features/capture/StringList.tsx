import { checksFor } from '../../domain/commissioning/checks/list';
import { checkContext, standingOf } from '../../domain/commissioning/checks/context';
import { signOffState } from '../../domain/commissioning/checks/sign-off';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { ButtonLink } from '../../components/ui/Button';
import { paths } from '../../schemas/paths';
import type { SiteProps } from './screen';
import { forString, stageOf, typesOf, kindsRead } from './view';
import { countAndKind } from './words';
import { stringList } from '../../words/capture';

/** The strings of the site: how far each is, and the way in. */
export function StringList({ site, view, change, state }: SiteProps) {
  const rows = site.strings.map((string) => {
    const { unitType, module } = typesOf(site, string);
    const readings = unitType ? kindsRead(string, stageOf(view, unitType).stage) : [];
    const context = unitType && module ? checkContext(site, string.id) : null;
    const asked = context ? checksFor(context).length : 0;
    const sign = context ? signOffState(string.checks.map(standingOf), context) : null;
    const failed = sign?.blocks.filter((b) => b.kind !== 'missing').length ?? 0;
    return { string, readings, asked, failed };
  });
  const q = view.q.trim().toLowerCase();
  const shown = rows.filter((r) => r.string.name.toLowerCase().includes(q));
  const without = rows.filter((r) => !r.readings.includes('positive_to_negative')).length;
  const heading =
    rows.length === 0
      ? stringList.thisSiteHasNo
      : without === 0
        ? stringList.everyStringHasIts
        : without === rows.length
          ? stringList.noStringHasA
          : stringList.ofNoReadingTo(without, rows.length);
  return (
    <div>
      <h1 tabIndex={-1} className="text-[28px] leading-[34px] tracking-[-0.03em] outline-none">
        {heading}
      </h1>
      <p className="mb-4 mt-1 text-[16px] leading-[22px] text-ink-2">
        {stringList.openStringForIts(site.site.name, site.site.place)}
      </p>
      <Field
        label={stringList.findAString}
        value={view.q}
        autoComplete="off"
        onChange={(event) => change({ q: event.target.value }, 'typed')}
      />
      {shown.length === 0 && rows.length > 0 && (
        <div className="mt-4">
          <Notice kind="empty" title={stringList.noStringIsCalled(view.q)}>
            {stringList.emptyTheFieldTo}
          </Notice>
        </div>
      )}
      <ul className="mt-4 border-t-2 border-ink bg-sheet">
        {shown.map(({ string, readings, asked, failed }) => (
          <li key={string.id} className="border-b border-rule-faint last:border-rule">
            <div className="flex items-center gap-2 px-3 py-2">
              <div className="min-w-0 flex-1">
                <p className="text-[17px] font-semibold">{string.name}</p>
                <p className="text-sm text-ink-2">{countAndKind(site, string)}</p>
                <p className="text-sm text-ink-2">
                  {stringList.ofReadingsOfChecks(readings.length, string.checks.length, asked)}
                  {string.signOff && !string.signOff.stale ? stringList.signedOff : ''}
                </p>
                {failed > 0 && (
                  <p className="text-sm font-medium text-rust-ink">{stringList.failed1OneCheck(failed)}</p>
                )}
              </div>
              <button
                type="button"
                className="min-h-[48px] rounded border border-rule bg-sheet px-3 text-[15px] font-medium"
                aria-label={stringList.readingsOf(string.name)}
                onClick={() => change({ ...forString(view, string.id), part: 'readings' })}
              >
                {stringList.readings}
              </button>
              <button
                type="button"
                className="min-h-[48px] rounded border border-rule bg-sheet px-3 text-[15px] font-medium"
                aria-label={stringList.checksOf(string.name)}
                onClick={() => change({ ...forString(view, string.id), part: 'checks' })}
              >
                {stringList.checks}
              </button>
            </div>
          </li>
        ))}
      </ul>
      <p className="mt-4 text-sm text-ink-2">
        {state.lasting ? stringList.whatYouRecordIs : stringList.thisBrowserKeepsNothing}
      </p>
      <ButtonLink className="mt-3 min-h-[44px]" href={paths.commissioningSite(site.site.id)}>
        {stringList.theSitesCommissioningPage}
      </ButtonLink>
    </div>
  );
}
