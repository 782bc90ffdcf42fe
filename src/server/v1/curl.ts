import { paths } from '../../schemas/paths';
import type { Operation } from './operation';

/** Examples for a shell, with what the reader sees put in. The token stays in the environment of the shell. */

/** What `$site` and the like stand for. */
export interface ExampleValues {
  site: string;
  string: string;
  /** A cause that holds now, and its site. */
  cause: string;
  causeSite: string;
  test: string;
  case: string;
  ref: string;
  from: string;
  to: string;
  fromDay: string;
  toDay: string;
  now: string;
}
/** In a system without a plant. */
const NONE = '00000000-0000-4000-8000-000000000000';

/** Yesterday's hour about noon and the week before it, for the plant given. */
export function exampleValues(
  at: Date,
  plant: { site: string; string: string } | undefined,
  others: {
    cause?: { key: string; siteId: string } | undefined;
    test?: string | undefined;
    case?: string | undefined;
  } = {},
): Omit<ExampleValues, 'ref'> {
  const dayOf = (days: number) => new Date(at.getTime() - days * 86_400_000).toISOString().slice(0, 10);
  return {
    site: plant?.site ?? NONE,
    string: plant?.string ?? NONE,
    cause: others.cause?.key ?? 'KEY OF A CAUSE',
    causeSite: others.cause?.siteId ?? plant?.site ?? NONE,
    test: others.test ?? NONE,
    case: others.case ?? NONE,
    from: `${dayOf(1)}T11:00:00Z`,
    to: `${dayOf(1)}T12:00:00Z`,
    fromDay: dayOf(8),
    toDay: dayOf(1),
    now: `${at.toISOString().slice(0, 19)}Z`,
  };
}

function filled(value: unknown, values: ExampleValues): unknown {
  if (typeof value === 'string' && value.startsWith('$'))
    return values[value.slice(1) as keyof ExampleValues] ?? value;
  if (Array.isArray(value)) return value.map((v) => filled(v, values));
  if (typeof value === 'object' && value !== null)
    return Object.fromEntries(Object.entries(value).map(([k, v]) => [k, filled(v, values)]));
  return value;
}
const quoted = (text: string): string => `'${text.replaceAll("'", `'\\''`)}'`;

export interface ExampleRequest {
  /** With its query, from /api/v1 on. */
  path: string;
  body: unknown;
}
/** What an example asks. */
export function exampleRequest(operation: Operation, values: ExampleValues): ExampleRequest {
  const { path = {}, query = {}, body } = operation.example;
  const address = operation.path.replace(/\{(\w+)\}/g, (_all, name: string) =>
    encodeURIComponent(String(filled(path[name] ?? '', values))),
  );
  const search = new URLSearchParams(filled(query, values) as Record<string, string>).toString();
  return {
    path: `${paths.api.v1(address)}${search ? `?${search}` : ''}`,
    body: body && filled(body, values),
  };
}

/** One command. @param origin of the site, as the reader reaches it */
export function curlOf(operation: Operation, origin: string, values: ExampleValues): string {
  const { path, body } = exampleRequest(operation, values);
  const lines = [
    `curl --silent --show-error --fail-with-body ${quoted(`${origin}${path}`)}`,
    `-H "Authorization: Bearer $WAKELINE_TOKEN"`,
  ];
  if (body !== undefined)
    lines.push(
      `-H 'Content-Type: application/json'`,
      `-H ${quoted(`Idempotency-Key: ${values.ref}`)}`,
      `--data ${quoted(JSON.stringify(body))}`,
    );
  return lines.join(' \\\n  ');
}
