import { csvColumns } from '../../../features/equipment/csv';
import { shownItems } from '../../../features/equipment/list';
import { equipmentCsvQuery, familyParams } from '../../../schemas/api/equipment';
import { endpoint } from '../../../server/http/endpoint';
import { csvResponse } from '../../../server/reports/csv';
import { readCatalogue } from '../../../server/services/equipment';

export const GET = endpoint(
  { permission: 'equipment.read', params: familyParams, query: equipmentCsvQuery },
  async ({ tx, params, query }) => {
    const catalogue = await readCatalogue(tx, params.family);
    return csvResponse(params.family, csvColumns(catalogue), shownItems(catalogue, query));
  },
);
