import fs from 'node:fs';
import path from 'node:path';
import ts from 'typescript';

export const ROOT = path.resolve(import.meta.dirname, '../..');

/** Folders that hold our source; anything else at the top level is configuration or made by tools. */
export const SOURCE_FOLDERS = ['src', 'simulator', 'migrations', 'seeds', 'tests'];
const CODE = /\.(ts|tsx|mts|mjs|js|astro|css)$/;
const RESOLVE = ['', '.ts', '.tsx', '.astro', '.mjs', '.json', '/index.ts', '/index.tsx'];

export interface Import {
  /** As written. */
  specifier: string;
  /** The file inside the checkout, relative to it; undefined for a package. */
  file: string | undefined;
  typeOnly: boolean;
}

export interface Source {
  file: string;
  text: string;
  imports: Import[];
}

function walk(folder: string): string[] {
  return fs.readdirSync(path.join(ROOT, folder), { withFileTypes: true }).flatMap((entry) => {
    const relative = path.posix.join(folder, entry.name);
    if (entry.isDirectory()) return walk(relative);
    return CODE.test(entry.name) ? [relative] : [];
  });
}

/** The TypeScript in a file: an .astro file's frontmatter and scripts, everything of the others. */
export function codeOf(file: string, text: string): string {
  if (!file.endsWith('.astro')) return text;
  const frontmatter = /^\s*---\r?\n([\s\S]*?)\r?\n---/.exec(text)?.[1] ?? '';
  const scripts = [...text.matchAll(/<script[^>]*>([\s\S]*?)<\/script>/g)].map((m) => m[1]);
  return [frontmatter, ...scripts].join('\n');
}

function resolve(from: string, specifier: string): string | undefined {
  let base: string;
  if (specifier.startsWith('.')) base = path.posix.join(path.posix.dirname(from), specifier);
  else if (specifier.startsWith('~/')) base = path.posix.join('src', specifier.slice(2));
  else return undefined;
  const stem = base.replace(/\.(js|jsx)$/, '');
  for (const candidate of RESOLVE.flatMap((end) => [base + end, stem + end]))
    if (fs.statSync(path.join(ROOT, candidate), { throwIfNoEntry: false })?.isFile()) return candidate;
  return base; // does not exist: the types check says so
}

export function parse(file: string, text: string): ts.SourceFile {
  const kind = file.endsWith('x') || file.endsWith('.astro') ? ts.ScriptKind.TSX : ts.ScriptKind.TS;
  return ts.createSourceFile(file, codeOf(file, text), ts.ScriptTarget.Latest, false, kind);
}

/** Every import of a file: static, re-exported, dynamic, and `import('…')` in types. */
export function importsOf(file: string, text: string): Import[] {
  if (file.endsWith('.css'))
    return [...text.matchAll(/@import\s+(?:url\()?['"]([^'"]+)['"]/g)].map((m) => ({
      specifier: m[1] ?? '',
      file: resolve(file, m[1] ?? ''),
      typeOnly: false,
    }));
  const found: Import[] = [];
  const add = (node: ts.Node | undefined, typeOnly: boolean): void => {
    if (node && ts.isStringLiteralLike(node))
      found.push({ specifier: node.text, file: resolve(file, node.text), typeOnly });
  };
  const visit = (node: ts.Node): void => {
    if (ts.isImportDeclaration(node))
      add(node.moduleSpecifier, node.importClause?.phaseModifier === ts.SyntaxKind.TypeKeyword);
    else if (ts.isExportDeclaration(node)) add(node.moduleSpecifier, node.isTypeOnly);
    else if (ts.isCallExpression(node) && node.expression.kind === ts.SyntaxKind.ImportKeyword)
      add(node.arguments[0], false);
    else if (ts.isImportTypeNode(node) && ts.isLiteralTypeNode(node.argument))
      add(node.argument.literal, true);
    ts.forEachChild(node, visit);
  };
  visit(parse(file, text));
  return found;
}

/** Every string and template of a file, with the parts of a template joined by a space. */
export function stringsOf(file: string, text: string): string[] {
  const found: string[] = [];
  const visit = (node: ts.Node): void => {
    if (ts.isStringLiteralLike(node)) found.push(node.text);
    else if (ts.isTemplateExpression(node))
      found.push([node.head.text, ...node.templateSpans.map((span) => span.literal.text)].join(' '));
    ts.forEachChild(node, visit);
  };
  visit(parse(file, text));
  return found;
}

const read = (): Source[] =>
  SOURCE_FOLDERS.filter((folder) => fs.existsSync(path.join(ROOT, folder)))
    .flatMap(walk)
    .map((file) => {
      const text = fs.readFileSync(path.join(ROOT, file), 'utf8');
      return { file, text, imports: importsOf(file, text) };
    });

let all: Source[] | undefined;
/** Every source file, read once for all tests of this folder. */
export const sources = (): Source[] => (all ??= read());

export const isTest = (file: string): boolean => /\.test\.tsx?$/.test(file);
