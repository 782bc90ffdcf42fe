import type { StepKey } from '../../domain/commissioning/steps';
import { paths } from '../../schemas/paths';
import type { StepNow } from '../../schemas/api/commissioning';
import { sharedCommissioningSteps } from '../../words/shared-commissioning';

export const STEP_NAMES: Record<StepKey, string> = {
  as_built: sharedCommissioningSteps.asBuilt,
  install_checks: sharedCommissioningSteps.installChecks,
  meter_readings: sharedCommissioningSteps.meterReadings,
  roll_call: sharedCommissioningSteps.rollCall,
  shutdown_test: sharedCommissioningSteps.shutdownTest,
  handover: sharedCommissioningSteps.handover,
};

/** Where each step is worked on. */
export const STEP_PAGES: Record<StepKey, (site: string) => string> = {
  as_built: paths.asBuilt,
  install_checks: paths.checks,
  meter_readings: paths.readings,
  roll_call: paths.rollCall,
  shutdown_test: paths.shutdownTests,
  handover: paths.handover,
};

export type StepMark = 'full' | 'half' | 'none' | 'now';

/** The box of a step: ticked, half filled, empty, or filled with petrol where the reader is. */
export function StepBox({ mark }: { mark: StepMark }) {
  return (
    <svg width="18" height="18" viewBox="0 0 18 18" aria-hidden="true" className="relative flex-none">
      <rect
        x="1"
        y="1"
        width="16"
        height="16"
        rx="2"
        fill={mark === 'now' ? 'var(--petrol)' : 'var(--sheet)'}
        stroke={mark === 'none' ? 'var(--ink-3)' : mark === 'now' ? 'var(--petrol)' : 'var(--ink)'}
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

export const STATE_MARK = {
  done: 'full',
  under_way: 'half',
  not_started: 'none',
} as const;
export const STATE_WORDS = {
  done: sharedCommissioningSteps.done,
  under_way: sharedCommissioningSteps.underWay,
  not_started: sharedCommissioningSteps.notStarted,
} as const;

/** One step as a link to where it is worked on. */
export function StepLink({
  site,
  step,
  current = false,
  className = '',
}: {
  site: string;
  step: Pick<StepNow, 'key' | 'state' | 'words'>;
  current?: boolean;
  className?: string;
}) {
  return (
    <a
      href={STEP_PAGES[step.key](site)}
      aria-current={current ? 'step' : undefined}
      className={`group flex min-h-[44px] gap-3 ${className}`}
    >
      <StepBox mark={current ? 'now' : STATE_MARK[step.state]} />
      <span className="min-w-0">
        <span className={`block group-hover:underline ${current ? 'font-semibold' : 'font-medium'}`}>
          {STEP_NAMES[step.key]}
          <span className="sr-only">, {STATE_WORDS[step.state]}</span>
        </span>
        <span className="block text-sm text-ink-2">{step.words}</span>
      </span>
    </a>
  );
}
