import { createHmac, randomBytes } from 'node:crypto';

/** The secret of a webhook: 256 random bits, shown once. */
export const newSecret = (): string => `wls_${randomBytes(32).toString('base64url')}`;

/**
 * The headers that prove who calls: HMAC-SHA256 (RFC 2104, FIPS 180-4) with the secret, over the time in epoch seconds,
 * a full stop and the body as it is sent. Whoever verifies refuses an old time, so that nobody plays a call again.
 */
export function signedHeaders(
  secret: string,
  call: { ref: string; body: string },
  at: Date,
): Record<string, string> {
  const time = String(Math.floor(at.getTime() / 1000));
  const signature = createHmac('sha256', secret).update(`${time}.${call.body}`).digest('hex');
  return {
    'content-type': 'application/json',
    'user-agent': 'Wakeline',
    'wakeline-delivery': call.ref,
    'wakeline-time': time,
    'wakeline-signature': `sha256=${signature}`,
  };
}
