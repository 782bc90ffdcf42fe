import type { StepKey } from '../../domain/commissioning/steps';
import type { StepNow } from '../../schemas/api/commissioning';
import { sharedCommissioningSteps } from '../../words/shared-commissioning';
import { StepLink } from './Steps';

interface Props {
  site: string;
  steps: readonly Pick<StepNow, 'key' | 'state' | 'words'>[];
  /** The step whose page this is. */
  here?: StepKey;
}

/** The steps of a site as a column, each a link to where it is worked on; a row of them on narrow screens. */
export function StepsList({ site, steps, here }: Props) {
  return (
    <nav aria-label={sharedCommissioningSteps.stepsOfCommissioning}>
      <ol className="grid grid-cols-2 gap-x-6 sm:grid-cols-3 xl:grid-cols-1">
        {steps.map((step) => (
          <li
            key={step.key}
            className="relative pb-5 xl:before:absolute xl:before:bottom-[3px] xl:before:left-2 xl:before:top-[23px] xl:before:w-[1.5px] xl:before:bg-rule xl:before:content-[''] xl:last:pb-0 xl:last:before:hidden"
          >
            <StepLink site={site} step={step} current={step.key === here} className="xl:min-h-0" />
          </li>
        ))}
      </ol>
    </nav>
  );
}
