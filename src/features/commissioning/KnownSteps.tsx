import type { ReactNode } from 'react';
import { counted, number } from '../../drawings/numbers';
import { clockOrDate, longDate } from '../../drawings/times';
import type { RollCallPage } from '../../schemas/api/roll-call';
import type { RollTally } from './tally';

type Mark = 'full' | 'half' | 'none';

function Box({ mark }: { mark: Mark }) {
  return (
    <svg width="18" height="18" viewBox="0 0 18 18" aria-hidden="true" className="flex-none">
      <rect
        x="1"
        y="1"
        width="16"
        height="16"
        rx="2"
        fill="var(--sheet)"
        stroke="var(--ink-3)"
        strokeWidth="1.5"
      />
      {mark === 'half' && <rect x="1" y="9" width="16" height="8" fill="var(--ink)" />}
      {mark === 'full' && (
        <>
          <rect x="1" y="1" width="16" height="16" rx="2" fill="var(--ink)" />
          <path d="m5 9.2 2.8 2.8L13 6.6" fill="none" stroke="var(--sheet)" strokeWidth="1.8" />
        </>
      )}
    </svg>
  );
}

function Step({
  mark,
  name,
  current,
  children,
}: {
  mark: Mark;
  name: string;
  current?: boolean;
  children: ReactNode;
}) {
  return (
    <li
      className="relative flex gap-3 pb-5 last:pb-0 before:absolute before:bottom-[3px] before:left-2 before:top-[23px] before:w-[1.5px] before:bg-rule before:content-[''] last:before:hidden"
      aria-current={current ? 'step' : undefined}
    >
      <Box mark={mark} />
      <div className="min-w-0">
        <p className={current ? 'font-semibold' : 'font-medium'}>{name}</p>
        <p className="text-sm text-ink-2">{children}</p>
      </div>
    </li>
  );
}

const markOf = (done: number, of: number): Mark => (done === 0 ? 'none' : done < of ? 'half' : 'full');

const RESULTS = {
  passed: 'passed',
  failed: 'not passed',
  consistent: 'readings agree, no meter',
  not_witnessed: 'not witnessed',
} as const;

/** What is recorded of the site today; a step without any record is left out. */
export function KnownSteps({ page, tally, open }: { page: RollCallPage; tally: RollTally; open: boolean }) {
  const { known, site, at } = page;
  return (
    <section aria-label="What is known of this site">
      <ol className="grid gap-0 sm:grid-cols-3 sm:gap-x-6 xl:grid-cols-1">
        <Step mark={markOf(known.placed, known.slots)} name="As-built">
          {known.placed === known.slots
            ? counted(known.slots, 'unit')
            : `${number(known.placed)} of ${counted(known.slots, 'unit')}`}
          , {counted(known.strings, 'string')}
        </Step>
        {known.checks.strings > 0 && (
          <Step
            mark={known.checks.failed > 0 ? 'half' : markOf(known.checks.strings, known.strings)}
            name="Install checks"
          >
            {known.checks.strings} of {counted(known.strings, 'string')} checked
            {known.checks.failed > 0 && `, ${counted(known.checks.failed, 'check')} failed`}
          </Step>
        )}
        {known.readings.lastAt && (
          <Step mark={markOf(known.readings.strings, known.strings)} name="Meter readings">
            {known.readings.strings} of {counted(known.strings, 'string')}, last{' '}
            {clockOrDate(known.readings.lastAt, at, site.timeZone)}
          </Step>
        )}
        {tally.roster > 0 && (
          <Step mark={markOf(tally.heard, tally.roster)} name="Roll call" current={open}>
            {number(tally.heard)} of {number(tally.roster)} heard
          </Step>
        )}
        {known.lastTest && (
          <Step mark={known.lastTest.result === 'passed' ? 'full' : 'half'} name="Shutdown test">
            {RESULTS[known.lastTest.result]}, {longDate(known.lastTest.at, site.timeZone)}
          </Step>
        )}
      </ol>
    </section>
  );
}
