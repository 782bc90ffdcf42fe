import { fleetColumns } from '../../features/fleet/columns';
import { fleetLines } from '../../features/fleet/list';
import { fleetCsvQuery } from '../../schemas/api/fleet';
import { endpoint } from '../../server/http/endpoint';
import { csvResponse } from '../../server/reports/csv';
import { readFleet } from '../../server/services/fleet';

export const GET = endpoint({ permission: 'fleet.read', query: fleetCsvQuery }, async ({ tx, query }) => {
  const at = new Date();
  const { sites, causes } = await readFleet(tx, at);
  return csvResponse(
    `fleet-${at.toISOString().slice(0, 16)}`,
    fleetColumns(at),
    fleetLines(sites, causes, query),
  );
});
