import { paths } from '../../schemas/paths';
import type { Operation } from './operation';

/** Examples for a shell, with what the reader sees put in. The token stays in the environment of the shell. */

/** What `$site` and the like stand for. */
export interface ExampleValues {
  site: string;
  string: string;
  cause: string;
  test: string;
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
  ref: string,
  plant: { site: string; string: string } | undefined,
  others: { cause?: string | undefined; test?: string | undefined } = {},
): ExampleValues {
  const dayOf = (days: number) => new Date(at.getTime() - days * 86_400_000).toISOString().slice(0, 10);
  return {
    site: plant?.site ?? NONE,
    string: plant?.string ?? NONE,
    cause: others.cause ?? 'KEY OF A CAUSE',
    test: others.test ?? NONE,
    ref,
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

/** One command. @param origin of the site, as the reader reaches it */
export function curlOf(operation: Operation, origin: string, values: ExampleValues): string {
  const { path = {}, query = {}, body } = operation.example;
  const address = operation.path.replace(/\{(\w+)\}/g, (_all, name: string) =>
    encodeURIComponent(String(filled(path[name] ?? '', values))),
  );
  const search = new URLSearchParams(filled(query, values) as Record<string, string>).toString();
  const url = `${origin}${paths.api.v1(address)}${search ? `?${search}` : ''}`;
  const lines = [
    `curl --silent --show-error --fail-with-body ${quoted(url)}`,
    `-H "Authorization: Bearer $WAKELINE_TOKEN"`,
  ];
  if (body)
    lines.push(
      `-H 'Content-Type: application/json'`,
      `-H ${quoted(`Idempotency-Key: ${values.ref}`)}`,
      `--data ${quoted(JSON.stringify(filled(body, values)))}`,
    );
  return lines.join(' \\\n  ');
}
