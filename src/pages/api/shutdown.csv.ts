import { SHUTDOWN_COLUMNS } from '../../features/shutdown/columns';
import { shutdownGroups, shutdownRows } from '../../features/shutdown/groups';
import { shutdownCsvQuery } from '../../schemas/api/shutdown';
import { endpoint } from '../../server/http/endpoint';
import { csvResponse } from '../../server/reports/csv';
import { readShutdown } from '../../server/services/fleet';

export const GET = endpoint(
  { permission: 'shutdown.read', query: shutdownCsvQuery },
  async ({ tx, query }) => {
    const at = new Date();
    const { causes } = await readShutdown(tx, at);
    return csvResponse(
      `shutdown-${at.toISOString().slice(0, 16)}`,
      SHUTDOWN_COLUMNS,
      shutdownRows(shutdownGroups(causes, query)),
    );
  },
);
