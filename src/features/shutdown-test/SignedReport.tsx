import { later } from '../../lib/later';
import { Report } from './Report';

/** The report of a signed test: complete as the server sends it, its code only for what can be opened in it. */
export const SignedReport = later(
  async () => (await import('./Report')).Report,
  import.meta.env.SSR ? Report : null,
);
