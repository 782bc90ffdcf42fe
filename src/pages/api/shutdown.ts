import { endpoint } from '../../server/http/endpoint';
import { readShutdown } from '../../server/services/fleet';

export const GET = endpoint({ permission: 'shutdown.read' }, ({ tx }) => readShutdown(tx, new Date()));
