import { createHmac } from 'node:crypto';

/**
 * The token of a demo logger: the seed stores its hash and the simulator shows it, both from one secret of the
 * installation, so that no token lies in a file. Base64url, 43 characters.
 */
export const loggerToken = (secret: string, loggerSerial: string): string =>
  createHmac('sha256', secret).update(`logger:${loggerSerial}`).digest('base64url');
