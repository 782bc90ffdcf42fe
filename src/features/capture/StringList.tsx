import { checksFor } from '../../domain/commissioning/checks/list';
import { checkContext, standingOf } from '../../domain/commissioning/checks/context';
import { signOffState } from '../../domain/commissioning/checks/sign-off';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { ButtonLink } from '../../components/ui/Button';
import { countAtStart, counted } from '../../drawings/numbers';
import { paths } from '../../schemas/paths';
import type { SiteProps } from './screen';
import { forString, stageOf, typesOf, kindsRead } from './view';
import { countAndKind } from './words';

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
      ? 'This site has no strings yet'
      : without === 0
        ? 'Every string has its reading + to −'
        : without === rows.length
          ? 'No string has a reading + to − yet'
          : `${countAtStart(without)} of ${counted(rows.length, 'string')} ${without === 1 ? 'has' : 'have'} no reading + to − yet`;
  return (
    <div>
      <h1 tabIndex={-1} className="text-[28px] leading-[34px] tracking-[-0.03em] outline-none">
        {heading}
      </h1>
      <p className="mb-4 mt-1 text-[16px] leading-[22px] text-ink-2">
        {`${site.site.name}, ${site.site.place}. Open a string for its readings and its install checks; both work without a network.`}
      </p>
      <Field
        label="Find a string"
        value={view.q}
        autoComplete="off"
        onChange={(event) => change({ q: event.target.value }, 'typed')}
      />
      {shown.length === 0 && rows.length > 0 && (
        <div className="mt-4">
          <Notice kind="empty" title={`No string is called like "${view.q}"`}>
            Empty the field to see all.
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
                  {`${readings.length} of 3 readings, ${string.checks.length} of ${asked} checks`}
                  {string.signOff && !string.signOff.stale ? ', signed off' : ''}
                </p>
                {failed > 0 && (
                  <p className="text-sm font-medium text-rust-ink">
                    {failed === 1 ? 'One check blocks' : `${failed} checks block`} the sign-off
                  </p>
                )}
              </div>
              <button
                type="button"
                className="min-h-[48px] rounded border border-rule bg-sheet px-3 text-[15px] font-medium"
                aria-label={`Readings of ${string.name}`}
                onClick={() => change({ ...forString(view, string.id), part: 'readings' })}
              >
                Readings
              </button>
              <button
                type="button"
                className="min-h-[48px] rounded border border-rule bg-sheet px-3 text-[15px] font-medium"
                aria-label={`Checks of ${string.name}`}
                onClick={() => change({ ...forString(view, string.id), part: 'checks' })}
              >
                Checks
              </button>
            </div>
          </li>
        ))}
      </ul>
      <p className="mt-4 text-sm text-ink-2">
        {state.lasting
          ? 'What you record is kept on this phone until the server has it.'
          : 'This browser keeps nothing: do not close this page while something waits.'}
      </p>
      <ButtonLink className="mt-3 min-h-[44px]" href={paths.commissioningSite(site.site.id)}>
        The site’s commissioning page
      </ButtonLink>
    </div>
  );
}
