/** How a receiver proves that a call is Wakeline's. Shown on the page as it is, and run by a test as it is. */
export const VERIFY_EXAMPLE = `import { createHmac, timingSafeEqual } from 'node:crypto';

// headers: names in small letters; body: the bytes as they came, before any parsing
export function isFromWakeline(headers, body, secret, nowS = Date.now() / 1000) {
  const time = headers['wakeline-time'] ?? '';
  const given = Buffer.from(headers['wakeline-signature'] ?? '');
  const mine = 'sha256=' + createHmac('sha256', secret).update(time + '.').update(body).digest('hex');
  const isRecent = Math.abs(nowS - Number(time)) <= 300; // an old call is not played again
  return isRecent && given.length === mine.length && timingSafeEqual(given, Buffer.from(mine));
}
`;
