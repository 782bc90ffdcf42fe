import { readdirSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { Validator } from '@seriousme/openapi-schema-validator';
import { beforeAll, describe, expect, it } from 'vitest';
import { TOKEN_SCOPES } from '../../domain/access/scopes';
import { curlOf, exampleValues } from './curl';
import { openApiDocument } from './document';
import { OPERATIONS, operationsAt } from './operations';

const PAGES = fileURLToPath(new URL('../../pages/api/v1', import.meta.url));

describe('the OpenAPI document', () => {
  let paths: Record<
    string,
    Record<string, { operationId?: string; parameters?: { name?: string; in?: string }[] }>
  >;
  beforeAll(() => {
    paths = JSON.parse(JSON.stringify(openApiDocument().paths)) as typeof paths;
  });

  it('is valid OpenAPI 3.1, by a validator that is not ours', async () => {
    const plain = JSON.parse(JSON.stringify(openApiDocument())) as Record<string, unknown>;
    const validator = new Validator();
    const result = await validator.validate(plain);
    expect(result.valid, JSON.stringify(result).slice(0, 2000)).toBe(true);
    expect(validator.version).toBe('3.1');
  });

  it('names what is routed, and nothing else', () => {
    const documented = Object.entries(paths).flatMap(([path, item]) =>
      Object.keys(item).map((method) => `${method.toUpperCase()} ${path}`),
    );
    const files = readdirSync(PAGES, { recursive: true, encoding: 'utf8' })
      .filter((f) => f.endsWith('.ts') && !f.startsWith('['))
      .map((f) => `/${f.replace(/\.ts$/, '').replace(/\/index$/, '')}`)
      .filter((f) => f !== '/openapi.json');
    const others = documented.filter((d) => !OPERATIONS.some((o) => `${o.method} ${o.path}` === d));
    expect(documented).toEqual(expect.arrayContaining(OPERATIONS.map((o) => `${o.method} ${o.path}`)));
    expect(others.map((d) => d.split(' ')[1]).sort()).toEqual(files.sort());
  });

  it('has each query parameter of each operation', () => {
    for (const operation of OPERATIONS) {
      const shape = (operation.query as { shape?: Record<string, unknown> } | undefined)?.shape ?? {};
      const said = paths[operation.path]?.[operation.method.toLowerCase()]?.parameters ?? [];
      expect(
        said
          .filter((p) => p.in === 'query')
          .map((p) => p.name)
          .sort(),
        operation.id,
      ).toEqual(Object.keys(shape).sort());
      expect(said.filter((p) => p.in === 'path').map((p) => `{${p.name}}`)).toEqual(
        operation.path.match(/\{\w+\}/g) ?? [],
      );
    }
  });

  it('gives each operation a name of its own and a scope that exists', () => {
    expect(new Set(OPERATIONS.map((o) => o.id)).size).toBe(OPERATIONS.length);
    for (const o of OPERATIONS) if (o.scope !== null) expect(TOKEN_SCOPES).toContain(o.scope);
    expect(TOKEN_SCOPES.filter((s) => !OPERATIONS.some((o) => o.scope === s))).toEqual([]);
  });
});

describe('an address', () => {
  it('leads to its operation with what it names', () => {
    const found = operationsAt('/api/v1/sites/abc/readings');
    expect(found?.operations.map((o) => o.id)).toEqual(['recordMeterReading']);
    expect(found?.params).toEqual({ site: 'abc' });
    expect(operationsAt('/api/v1/sites')?.operations.map((o) => o.id)).toEqual(['listSites']);
    expect(operationsAt('/api/v1/sites/a/b/c')).toBeUndefined();
    expect(operationsAt('/api/v1/')).toBeUndefined();
  });
});

describe('an example', () => {
  const plant = {
    site: 'a11d1f6e-0000-4000-8000-000000000001',
    string: 'a11d1f6e-0000-4000-8000-000000000002',
  };
  const values = {
    ...exampleValues(new Date('2026-11-30T12:00:00Z'), plant),
    ref: 'a11d1f6e-0000-4000-8000-000000000003',
  };
  it.each(OPERATIONS.map((o) => [o.id, o] as const))(
    '%s is whole and says nothing that is refused',
    (_id, o) => {
      const curl = curlOf(o, 'https://wakeline.example', values);
      expect(curl).not.toMatch(/\$(?!WAKELINE_TOKEN)/);
      expect(curl).toContain(`https://wakeline.example/api/v1${o.path.split('{')[0]}`);
      const url = new URL(/'(https:[^']+)'/.exec(curl)?.[1] ?? '');
      if (o.query) expect(o.query.safeParse(Object.fromEntries(url.searchParams)).error).toBeUndefined();
      if (o.body)
        expect(o.body.safeParse(JSON.parse(/--data '(.*)'$/s.exec(curl)?.[1] ?? '')).error).toBeUndefined();
    },
  );
  it('survives a quote in what it carries', () => {
    const [o] = OPERATIONS.filter((x) => x.id === 'openCase');
    expect(curlOf({ ...o!, example: { body: { title: "it's" } } }, 'https://x.example', values)).toContain(
      `it'\\''s`,
    );
  });
});
