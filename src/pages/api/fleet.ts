import { endpoint } from '../../server/http/endpoint';
import { readFleet } from '../../server/services/fleet';

export const GET = endpoint({ permission: 'fleet.read' }, ({ tx }) => readFleet(tx, new Date()));
