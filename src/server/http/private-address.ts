import { BlockList, isIP } from 'node:net';

/**
 * Which addresses belong to nobody on the public network: a call to another system must not reach into ours. By the
 * special-purpose registries (RFC 6890 and IANA's lists); of IPv6 only global unicast (2000::/3) is public at all.
 */
const SPECIAL_4: readonly [string, number][] = [
  ['0.0.0.0', 8],
  ['10.0.0.0', 8],
  ['100.64.0.0', 10],
  ['127.0.0.0', 8],
  ['169.254.0.0', 16],
  ['172.16.0.0', 12],
  ['192.0.0.0', 24],
  ['192.0.2.0', 24],
  ['192.88.99.0', 24],
  ['192.168.0.0', 16],
  ['198.18.0.0', 15],
  ['198.51.100.0', 24],
  ['203.0.113.0', 24],
  ['224.0.0.0', 4],
  ['240.0.0.0', 4],
];
const SPECIAL_6: readonly [string, number][] = [
  ['2001::', 23],
  ['2001:db8::', 32],
  ['2002::', 16], // wraps an IPv4 address
  ['3fff::', 20],
];

const special = new BlockList();
for (const [net, prefix] of SPECIAL_4) special.addSubnet(net, prefix, 'ipv4');
for (const [net, prefix] of SPECIAL_6) special.addSubnet(net, prefix, 'ipv6');
const global6 = new BlockList();
global6.addSubnet('2000::', 3, 'ipv6');
const loopback = new BlockList();
loopback.addSubnet('127.0.0.0', 8, 'ipv4');
loopback.addAddress('::1', 'ipv6');

/** @param address an IP address in text; what is none is not public */
export function isPublicAddress(address: string): boolean {
  const family = isIP(address);
  if (family === 4) return !special.check(address, 'ipv4');
  return family === 6 && global6.check(address, 'ipv6') && !special.check(address, 'ipv6');
}

export function isLoopback(address: string): boolean {
  const family = isIP(address);
  return family !== 0 && loopback.check(address, family === 4 ? 'ipv4' : 'ipv6');
}
