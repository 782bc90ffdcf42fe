/**
 * Same origin, or no browser at all (servers and command lines carry no victim's cookie). Covers forms, JSON,
 * requests without a body and WebSocket upgrades, on any host name.
 */
export function sameOrigin(headers: { get(name: string): string | null }): boolean {
  const site = headers.get('sec-fetch-site');
  if (site) return site === 'same-origin' || site === 'none';
  const origin = headers.get('origin');
  if (!origin) return true;
  return URL.canParse(origin) && new URL(origin).host === headers.get('host');
}

/** The same for an upgrade. Browsers always send Origin with it and not all send Sec-Fetch-Site. */
export function sameOriginUpgrade(headers: { origin?: string; host?: string }): boolean {
  if (!headers.origin) return true;
  return URL.canParse(headers.origin) && new URL(headers.origin).host === headers.host;
}
