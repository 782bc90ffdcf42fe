import { useMemo } from 'react';
import { checkContext, standingOf } from '../../domain/commissioning/checks/context';
import { judgeCheck } from '../../domain/commissioning/checks/judge';
import { checksFor } from '../../domain/commissioning/checks/list';
import { signOffState } from '../../domain/commissioning/checks/sign-off';
import type { StringCheck } from '../../domain/commissioning/checks/definition';
import type { ShownCheck } from '../../lib/capture-records';
import { CheckForm } from './CheckForm';
import { SignOffSheet } from './SignOffSheet';
import type { ScreenProps } from './screen';
import { VIEW_DEFAULTS, typesOf } from './view';
import { checkScreen } from '../../words/capture';

const PHASES = [
  { phase: 'mounting', title: checkScreen.whileTheUnitsGo },
  { phase: 'before_energising', title: checkScreen.beforeEnergising },
  { phase: 'energised', title: checkScreen.onceCurrentFlows },
] as const;
const MARK = { pass: '✓', fail: '×', not_applicable: '–' } as const;
const WORD = { pass: 'pass', fail: 'fail', not_applicable: checkScreen.notApplicable } as const;

/** The install checks of one string, one open at a time, and what its sign-off needs. */
export function CheckScreen(props: ScreenProps) {
  const { site, string, view, change } = props;
  const { unitType, module } = typesOf(site, string);
  const context = useMemo(
    () => (unitType && module ? checkContext(site, string.id) : null),
    [site, string.id, unitType, module],
  );
  if (!context) return <p>{checkScreen.theTypesOfThis}</p>;
  const checks = checksFor(context);
  const recordOf = (check: StringCheck): ShownCheck | null =>
    string.checks.find((c) => c.check === check.key) ?? null;
  const state = signOffState(string.checks.map(standingOf), context);
  const open = checks.filter((check) => !recordOf(check)).length;
  const heading =
    open === 0
      ? state.maySign
        ? checkScreen.everyCheckOf(string.name)
        : checkScreen.somethingBlocksTheSign(string.name)
      : checkScreen.ofChecksOpenAt(open, checks.length, string.name);
  const saved = () => {
    if (view.fix) {
      change({ ...VIEW_DEFAULTS, part: 'waiting' });
      return;
    }
    const at = checks.findIndex((check) => check.key === view.check);
    const next = [...checks.slice(at + 1), ...checks.slice(0, at)].find((check) => !recordOf(check));
    change({ check: next?.key ?? '', draft: '', fix: '' });
  };
  return (
    <div>
      <h1 tabIndex={-1} className="text-[28px] leading-[34px] tracking-[-0.03em] outline-none">
        {heading}
      </h1>
      <p className="mb-4 mt-1 text-[16px] leading-[22px] text-ink-2">{checkScreen.openACheckDo}</p>
      {PHASES.map(({ phase, title }) => (
        <section key={phase} className="mb-5">
          <h2 className="mb-1 text-[15px]">{title}</h2>
          <ul className="border-t-2 border-ink bg-sheet">
            {checks
              .filter((check) => check.phase === phase)
              .map((check) => {
                const record = recordOf(check);
                const isOpen = view.check === check.key;
                const judged = record ? judgeCheck(standingOf(record), context) : null;
                return (
                  <li key={check.key} className="border-b border-rule-faint px-3">
                    <h3>
                      <button
                        type="button"
                        aria-expanded={isOpen}
                        className="flex min-h-[56px] w-full items-start gap-3 py-2 text-left font-normal"
                        onClick={() =>
                          change({ check: isOpen ? '' : check.key, draft: '', fix: isOpen ? '' : view.fix })
                        }
                      >
                        <span
                          aria-hidden="true"
                          className={`w-5 shrink-0 text-[18px] leading-6 ${record?.result === 'fail' ? 'text-rust-ink' : 'text-ink'}`}
                        >
                          {record ? MARK[record.result] : '○'}
                        </span>
                        <span className="min-w-0 flex-1">
                          <span className="block text-[16px] font-semibold leading-6">{check.name}</span>
                          <span className="block text-sm text-ink-2">{check.asks}</span>
                        </span>
                        <span className="shrink-0 text-sm leading-6 text-ink-2">
                          {record ? WORD[record.result] : checkScreen.open}
                          {record?.waiting ? checkScreen.waiting : ''}
                        </span>
                      </button>
                    </h3>
                    {judged && judged.words.length > 0 && !isOpen && (
                      <p
                        className={`pb-2 pl-8 text-sm ${judged.weight === 'blocks' ? 'font-medium text-rust-ink' : 'text-ink-2'}`}
                      >
                        {judged.words.join(' ')}
                      </p>
                    )}
                    {isOpen && (
                      <CheckForm
                        key={`${check.key} ${view.fix}`}
                        {...props}
                        check={check}
                        record={record}
                        context={context}
                        onSaved={saved}
                      />
                    )}
                  </li>
                );
              })}
          </ul>
        </section>
      ))}
      <SignOffSheet {...props} sign={state} />
    </div>
  );
}
