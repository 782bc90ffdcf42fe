import { describe, expect, it } from 'vitest';
import { isLoopback, isPublicAddress } from './private-address';

describe('an address', () => {
  it.each(['8.8.8.8', '93.184.215.14', '2606:2800:21f:cb07:6820:80da:af6b:8b2c', '2a00:1450:4001:830::200e'])(
    '%s is public',
    (address) => {
      expect(isPublicAddress(address)).toBe(true);
    },
  );
  it.each([
    ...['127.0.0.1', '127.8.8.8', '10.1.2.3', '172.31.255.255', '192.168.0.1', '169.254.169.254', '0.0.0.0'],
    ...['100.100.100.200', '224.0.0.1', '255.255.255.255', '198.18.0.1'],
    ...['::1', '::', '::ffff:10.0.0.1', '::ffff:8.8.8.8', 'fe80::1', 'fd00::1', 'ff02::1', '64:ff9b::a00:1'],
    ...['2002:a00:1::', '2001:db8::1', 'example.com', ''],
  ])('%s is not', (address) => {
    expect(isPublicAddress(address)).toBe(false);
  });
  it('of this machine is told', () => {
    expect(['127.0.0.1', '127.1.1.1', '::1'].every(isLoopback)).toBe(true);
    expect(['10.0.0.1', '::', 'localhost'].some(isLoopback)).toBe(false);
  });
});
