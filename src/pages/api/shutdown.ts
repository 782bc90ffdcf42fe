import { sent } from '../../schemas/api/causes-on-the-way';
import { endpoint } from '../../server/http/endpoint';
import { readShutdown } from '../../server/services/fleet';

export const GET = endpoint({ permission: 'shutdown.read' }, async ({ tx }) =>
  sent(await readShutdown(tx, new Date())),
);
