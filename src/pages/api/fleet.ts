import { sent } from '../../schemas/api/causes-on-the-way';
import { endpoint } from '../../server/http/endpoint';
import { readFleet } from '../../server/services/fleet';

export const GET = endpoint({ permission: 'fleet.read' }, async ({ tx }) =>
  sent(await readFleet(tx, new Date())),
);
