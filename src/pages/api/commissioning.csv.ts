import { openGaps } from '../../domain/commissioning/steps';
import { listedSites } from '../../features/commissioning/under-way';
import { underWayView } from '../../schemas/api/commissioning';
import { endpoint } from '../../server/http/endpoint';
import { csvResponse } from '../../server/reports/csv';
import { sitesAndTheirSteps } from '../../server/services/commissioning';

export const GET = endpoint({ permission: 'roll_call.read', query: underWayView }, async ({ tx, query }) => {
  const sites = await sitesAndTheirSteps(tx);
  const step = (key: string) => ({
    header: key.replaceAll('_', ' '),
    value: (site: (typeof sites)[number]) => site.steps.find((s) => s.key === key)?.words,
  });
  return csvResponse(
    'commissioning',
    [
      { header: 'site', value: (s) => s.name },
      { header: 'place', value: (s) => s.place },
      { header: 'strings', value: (s) => s.strings },
      { header: 'units', value: (s) => s.units },
      step('as_built'),
      step('install_checks'),
      step('meter_readings'),
      step('roll_call'),
      step('shutdown_test'),
      step('handover'),
      { header: 'points that block', value: (s) => openGaps(s.steps).length },
      {
        header: 'what blocks',
        value: (s) =>
          openGaps(s.steps)
            .map((g) => g.words)
            .join(' '),
      },
      { header: 'last hand', value: (s) => s.lastHand?.person },
      { header: 'last hand at (UTC)', value: (s) => s.lastHand && new Date(s.lastHand.at) },
    ],
    listedSites(sites, query, new Date().toISOString()),
  );
});
