import { figuresQuery, fleetFiguresView } from '../../schemas/api/figures';
import { checked, endpoint } from '../../server/http/endpoint';
import { fleetFiguresCsv } from '../../server/reports/figures/csv';
import { fleetFigures } from '../../server/services/figures';

export const GET = endpoint({ permission: 'figures.read', mayLag: true }, async ({ tx, context }) => {
  const asked = Object.fromEntries(context.url.searchParams);
  const { period } = checked(figuresQuery.loose(), asked, 'query');
  return fleetFiguresCsv(await fleetFigures(tx, period, new Date()), fleetFiguresView.parse(asked));
});
