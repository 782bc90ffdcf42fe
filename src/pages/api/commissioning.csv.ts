import { openGaps, type StepKey } from '../../domain/commissioning/steps';
import { listedSites } from '../../features/commissioning/under-way';
import { underWayView } from '../../schemas/api/commissioning';
import { endpoint } from '../../server/http/endpoint';
import { csvResponse } from '../../server/reports/csv';
import { sitesAndTheirSteps } from '../../server/services/commissioning';
import { commissioningHeads } from '../../words/csv-heads';

export const GET = endpoint({ permission: 'roll_call.read', query: underWayView }, async ({ tx, query }) => {
  const sites = await sitesAndTheirSteps(tx);
  const step = (key: StepKey) => ({
    header: commissioningHeads.steps[key],
    value: (site: (typeof sites)[number]) => site.steps.find((s) => s.key === key)?.words,
  });
  return csvResponse(
    'commissioning',
    [
      { header: commissioningHeads.site, value: (s) => s.name },
      { header: commissioningHeads.place, value: (s) => s.place },
      { header: commissioningHeads.strings, value: (s) => s.strings },
      { header: commissioningHeads.units, value: (s) => s.units },
      step('as_built'),
      step('install_checks'),
      step('meter_readings'),
      step('roll_call'),
      step('shutdown_test'),
      step('handover'),
      { header: commissioningHeads.pointsThatBlock, value: (s) => openGaps(s.steps).length },
      {
        header: commissioningHeads.whatBlocks,
        value: (s) =>
          openGaps(s.steps)
            .map((g) => g.words)
            .join(' '),
      },
      { header: commissioningHeads.lastHand, value: (s) => s.lastHand?.person },
      { header: commissioningHeads.lastHandAtUtc, value: (s) => s.lastHand && new Date(s.lastHand.at) },
    ],
    listedSites(sites, query, new Date().toISOString()),
  );
});
