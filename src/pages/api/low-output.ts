import { endpoint } from '../../server/http/endpoint';
import { readLowOutput } from '../../server/services/low-output';

export const GET = endpoint({ permission: 'cause.read', mayLag: true }, ({ tx }) =>
  readLowOutput(tx, new Date()),
);
