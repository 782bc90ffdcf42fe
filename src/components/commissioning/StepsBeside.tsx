import { later } from '../../lib/later';
import { StepsList } from './StepsList';

/** The steps of a site beside the one that is worked on: links, whose code is only needed once a step's state changes. */
export const StepsBeside = later(
  async () => (await import('./StepsList')).StepsList,
  import.meta.env.SSR ? StepsList : null,
);
