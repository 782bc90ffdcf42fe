import type { Plugin, Rollup } from 'vite';

type Program = ReturnType<Rollup.PluginContext['parse']>;
type Statement = Program['body'][number];

const WORDS = /\/src\/words\/[\w/-]+\.ts$/;
const PATHS = /\/src\/schemas\/paths\.ts$/;
const ASKED = '?of=';
/** The export of a file that holds one URL's builder. */
const PATH = 'path';

interface Node {
  type: string;
  start: number;
  end: number;
}
interface Member extends Node {
  object: Node;
  property: Node;
  computed: boolean;
}
interface Change {
  start: number;
  end: number;
  text: string;
}

const isNode = (value: unknown): value is Node =>
  typeof value === 'object' && value !== null && 'type' in value && 'start' in value;
const childrenOf = (node: Node): Node[] => Object.values(node).flat().filter(isNode);
const nameOf = (node: unknown): string =>
  isNode(node) && 'name' in node && typeof node.name === 'string' ? node.name : '';
/** rollup's parser gives every node its place, which the types leave out. */
const placed = (program: Program): (Statement & Node)[] => program.body as (Statement & Node)[];

const withChanges = (code: string, changes: readonly Change[]): string =>
  [...changes]
    .sort((a, b) => b.start - a.start)
    .reduce((text, { start, end, text: by }) => text.slice(0, start) + by + text.slice(end), code);

/** What a statement declares, if it exports it. */
function exported(statement: Statement): string[] {
  if (statement.type !== 'ExportNamedDeclaration' || !statement.declaration) return [];
  const { declaration } = statement;
  return declaration.type === 'VariableDeclaration'
    ? declaration.declarations.map(({ id }) => nameOf(id))
    : [declaration.id.name];
}

/** The names after `root` where a node is `root.a` or `root.api.a`. */
function chain(node: Node, root: string): string[] {
  if (node.type !== 'MemberExpression') return [];
  const { object, property, computed } = node as Member;
  if (computed) return [];
  if (nameOf(object) === root) return [nameOf(property)];
  const before = chain(object, root);
  return before.length > 0 ? [...before, nameOf(property)] : [];
}

/** Where a file says `root.a`; null: it uses `root` in another way too, and needs it whole. */
function usesOf(program: Program, root: string): (Node & { of: string })[] | null {
  const found: (Node & { of: string })[] = [];
  let whole = false;
  const walk = (node: Node): void => {
    if (node.type === 'ImportDeclaration') return;
    const names = chain(node, root);
    if (names.length > 0) {
      found.push({ type: node.type, start: node.start, end: node.end, of: names.join('.') });
      return;
    }
    if (node.type === 'Identifier' && nameOf(node) === root) whole = true;
    const { computed, property, key } = node as Partial<Member> & Node & { key?: Node };
    const label = computed === false ? (property ?? key) : undefined; // `x.paths`, `{ paths: … }`
    for (const child of childrenOf(node)) if (child !== label) walk(child);
  };
  placed(program).forEach(walk);
  return whole ? null : found;
}

/** What stands under `names` in an object's text. */
function valueIn(node: Node, names: readonly string[]): Node | undefined {
  const [name, ...rest] = names;
  if (name === undefined) return node;
  const { properties = [] } = node as Node & { properties?: (Node & { key: Node; value: Node })[] };
  const found = properties.find(({ key }) => nameOf(key) === name)?.value;
  return found && valueIn(found, rest);
}

/** A file with one of its exports; of the paths with one path. */
function alone(code: string, program: Program, of: string, isPaths: boolean): Change[] {
  return placed(program).flatMap((statement) => {
    const { start, end } = statement;
    const names = exported(statement);
    if (names.length === 0 || names.includes(of)) return [];
    if (!isPaths || !names.includes('paths')) return [{ start, end: start + 'export'.length, text: '' }];
    const { declaration } = statement as Extract<Statement, { type: 'ExportNamedDeclaration' }>;
    const all = declaration?.type === 'VariableDeclaration' && declaration.declarations[0]?.init;
    const found = isNode(all) ? valueIn(all, of.split('.')) : undefined;
    if (!found) throw new Error(`schemas/paths has no ${of}.`);
    return [{ start, end, text: `export const ${PATH} = ${code.slice(found.start, found.end)};` }];
  });
}

/** A file that asks for each text and each path by itself. */
function asked(program: Program, file: string): Change[] {
  return placed(program).flatMap((statement): Change[] => {
    if (statement.type !== 'ImportDeclaration' || statement.specifiers.length === 0) return [];
    const from = String(statement.source.value);
    const names: { of: string; as: string }[] = [];
    for (const specifier of statement.specifiers) {
      if (specifier.type !== 'ImportSpecifier') return [];
      names.push({ of: nameOf(specifier.imported), as: specifier.local.name });
    }
    const { start, end } = statement;
    const said = (of: string, as: string, query = ''): string =>
      `import { ${of} as ${as} } from '${from}${query}';`;
    if (/\/words\/[\w-]+$/.test(from) || (WORDS.test(file) && /^\.\/[\w-]+$/.test(from)))
      return [{ start, end, text: names.map(({ of, as }) => said(of, as, ASKED + of)).join('') }];
    const root = /\/paths$/.test(from) && names.find(({ of }) => of === 'paths')?.as;
    const uses = root ? usesOf(program, root) : null;
    if (!root || !uses) return [];
    const local = (of: string): string => `${root}$${of.replaceAll('.', '$')}`;
    // a module for each place: so short a function costs less twice than a file that holds it
    const here = file.replaceAll('/', '.');
    const others = names.filter(({ of }) => of !== 'paths').map(({ of, as }) => said(of, as));
    const own = [...new Set(uses.map(({ of }) => of))].map((of) =>
      said(PATH, local(of), `${ASKED}${of}&in=${here}`),
    );
    return [
      { start, end, text: [...others, ...own].join('') },
      ...uses.map((use) => ({ start: use.start, end: use.end, text: local(use.of) })),
    ];
  });
}

/**
 * For the browser each object of texts is a module of its own and each URL's builder stands where it is used: a page
 * carries no other page's words and paths. Sources read as ever: `import { a, b } from '../words/x'` becomes an import of
 * `x?of=a` and one of `x?of=b`, each the file with that export alone.
 */
export function apart(): Plugin {
  return {
    name: 'wakeline:apart',
    apply: 'build',
    applyToEnvironment: (environment) => environment.name === 'client',
    resolveId: {
      order: 'pre', // before the language, which knows files by their names
      async handler(source, importer, options) {
        const at = source.indexOf(ASKED);
        if (at < 0) return null;
        const found = await this.resolve(source.slice(0, at), importer, options);
        return found && found.id + source.slice(at);
      },
    },
    transform(code, id) {
      const [file = id, query] = id.split(ASKED);
      if (!file.includes('/src/') || !/\.tsx?$/.test(file)) return null;
      const program = this.parse(code);
      const changes = asked(program, file);
      const of = query?.split('&')[0];
      if (of) changes.push(...alone(code, program, of, PATHS.test(file)));
      return changes.length > 0 ? { code: withChanges(code, changes), map: null } : null;
    },
  };
}
