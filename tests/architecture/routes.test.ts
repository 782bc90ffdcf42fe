import path from 'node:path';
import ts from 'typescript';
import { describe, expect, it } from 'vitest';
import { PERMISSIONS } from '../../src/domain/access/permissions';
import { parse, sources } from './sources';

/** Pages that are shown in place of another, after that one has decided. */
const IN_PLACE = ['src/pages/404.astro', 'src/pages/500.astro', 'src/pages/problem.astro'];
const METHODS = ['GET', 'POST', 'PUT', 'PATCH', 'DELETE', 'HEAD', 'OPTIONS', 'ALL'];

const routes = sources().filter(({ file }) => file.startsWith('src/pages/') && !IN_PLACE.includes(file));

const calleeOf = (node: ts.Node | undefined): string | undefined =>
  node && ts.isCallExpression(node) && ts.isIdentifier(node.expression) ? node.expression.text : undefined;

const known = (permission: string | undefined): boolean =>
  permission === 'public' || (permission !== undefined && permission in PERMISSIONS);

/** `permission` of the first argument of `endpoint({...})` or `publicEndpoint({...})`. */
function declared(call: ts.CallExpression): string | undefined {
  const spec = call.arguments[0];
  if (!spec || !ts.isObjectLiteralExpression(spec)) return undefined;
  for (const property of spec.properties)
    if (
      ts.isPropertyAssignment(property) &&
      ts.isIdentifier(property.name) &&
      property.name.text === 'permission' &&
      ts.isStringLiteralLike(property.initializer)
    )
      return property.initializer.text;
  return undefined;
}

/** What is wrong with an API file: every exported method is made by the wrapper with a permission that exists. */
export function endpointFaults(file: string, text: string): string[] {
  const faults: string[] = [];
  let methods = 0;
  for (const statement of parse(file, text).statements) {
    const exported =
      ts.canHaveModifiers(statement) &&
      ts.getModifiers(statement)?.some((m) => m.kind === ts.SyntaxKind.ExportKeyword);
    if (ts.isExportDeclaration(statement)) faults.push(`${file} re-exports; declare each method here`);
    if (!exported) continue;
    if (!ts.isVariableStatement(statement)) {
      if (ts.isFunctionDeclaration(statement))
        faults.push(`${file} exports a function of its own, past the wrapper`);
      continue;
    }
    for (const { name, initializer } of statement.declarationList.declarations) {
      const method = ts.isIdentifier(name) ? name.text : '';
      if (method === 'prerender') faults.push(`${file} is prerendered: nobody asks who reads it`);
      if (!METHODS.includes(method)) continue;
      methods++;
      const wrapper = calleeOf(initializer);
      const permission = initializer && ts.isCallExpression(initializer) ? declared(initializer) : undefined;
      const fits =
        wrapper === 'endpoint'
          ? permission !== 'public' && known(permission)
          : wrapper === 'publicEndpoint' && permission === 'public';
      if (!fits)
        faults.push(`${file} ${method} declares no permission through endpoint() or publicEndpoint()`);
    }
  }
  return methods === 0 ? [...faults, `${file} exports no method`] : faults;
}

/** What is wrong with a page: its frontmatter calls `page(Astro, 'a permission that exists', …)` and returns a Response of it, or `publicPage(Astro)`. */
export function pageFaults(file: string, text: string): string[] {
  const permissions: (string | undefined)[] = [];
  let isPublic = false;
  const visit = (node: ts.Node): void => {
    if (ts.isCallExpression(node) && calleeOf(node) === 'page') {
      const permission = node.arguments[1];
      permissions.push(permission && ts.isStringLiteralLike(permission) ? permission.text : undefined);
    }
    if (calleeOf(node) === 'publicPage') isPublic = true;
    ts.forEachChild(node, visit);
  };
  visit(parse(file, text));
  if (/export\s+const\s+prerender\s*=\s*true/.test(text))
    return [`${file} is prerendered: nobody asks who reads it`];
  if (isPublic && permissions.length === 0) return [];
  if (permissions.length !== 1 || !known(permissions[0]) || permissions[0] === 'public')
    return [`${file} declares no permission through page() or publicPage()`];
  return /if\s*\(\s*\w+\s+instanceof\s+Response\s*\)\s*(\{\s*)?return\s/.test(text)
    ? []
    : [`${file} does not return the Response of page(): a stranger would see the page`];
}

const faultsOf = (file: string, text: string) =>
  (path.extname(file) === '.astro' ? pageFaults : endpointFaults)(file, text);

describe('routes', () => {
  it('are there', () => {
    expect(routes.length).toBeGreaterThan(3);
  });

  it.each(routes.map(({ file, text }) => [file, text] as const))('%s says who may', (file, text) => {
    expect(faultsOf(file, text)).toEqual([]);
  });
});

describe('the rule itself', () => {
  it.each([
    ['a.ts', `export const GET = endpoint({ permission: 'fleet.read' }, run);`, 0],
    ['a.ts', `export const GET = publicEndpoint({ permission: 'public' }, run);`, 0],
    ['a.ts', `export const GET = endpoint({ permission: 'fleet.raed' }, run);`, 1],
    ['a.ts', `export const GET = endpoint({ permission: 'public' }, run);`, 1],
    ['a.ts', `export const GET = endpoint({}, run);`, 1],
    ['a.ts', `export const GET: APIRoute = async () => new Response('');`, 1],
    ['a.ts', `export async function GET() { return new Response(''); }`, 2],
    ['a.ts', `export { GET } from './b';`, 2],
    [
      'a.ts',
      `export const prerender = true; export const GET = publicEndpoint({ permission: 'public' }, run);`,
      1,
    ],
    ['a.ts', `const GET = 1;`, 1],
    [
      'a.astro',
      `---\nconst l = await page(Astro, 'fleet.read', load);\nif (l instanceof Response) return l;\n---\n`,
      0,
    ],
    ['a.astro', `---\nconst l = await page(Astro, 'fleet.read', load);\n---\n`, 1],
    [
      'a.astro',
      `---\nconst l = await page(Astro, 'nothing', load);\nif (l instanceof Response) return l;\n---\n`,
      1,
    ],
    ['a.astro', `---\npublicPage(Astro);\n---\n`, 0],
    ['a.astro', `---\nconst x = 1;\n---\n`, 1],
  ])('%s %s: %i faults', (file, text, faults) => {
    expect(faultsOf(file, text)).toHaveLength(faults);
  });
});
