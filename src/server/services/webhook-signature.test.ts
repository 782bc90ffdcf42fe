import { expect, it } from 'vitest';
import { newSecret, signedHeaders } from './webhook-signature';

// openssl: printf '1764590400.{}' | openssl dgst -sha256 -hmac key
it('a call is signed with HMAC-SHA256 as openssl makes it', () => {
  const headers = signedHeaders('key', { ref: 'x', body: '{}' }, new Date(1764590400 * 1000));
  expect(headers).toMatchObject({
    'wakeline-delivery': 'x',
    'wakeline-time': '1764590400',
    'wakeline-signature': 'sha256=c0afee26c4149b3dd9d36d1d9c5c903540588fd4b83dbb022facf23988588272',
  });
});

it('a secret is 256 bits, another each time', () => {
  expect(newSecret()).toMatch(/^wls_[A-Za-z0-9_-]{43}$/);
  expect(newSecret()).not.toBe(newSecret());
});
