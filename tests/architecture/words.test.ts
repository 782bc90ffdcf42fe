import fs from 'node:fs';
import path from 'node:path';
import ts from 'typescript';
import { describe, expect, it } from 'vitest';
import { isTest, ROOT, sources } from './sources';

/** Attributes that people read or hear. */
const READ = new Set(
  'title label alt placeholder hint caption aside heading finding sentence note legend strong aria-label aria-description'.split(
    ' ',
  ),
);
/** What is the same in every language: the product, units, names of formats and of standards. */
const EVERYWHERE =
  /^(Wakeline|CSV|PDF|ZIP|PNG|JSON|OpenAPI 3\.1|k?Wh|MWh|k?Wp?|k?V|m?A|Hz|min|dBm|[kMG]?Ω|°[CF]|kWh\/kWp|W\/m²)$/;
/** Elements whose text is typed into a machine. */
const CODE = /^(code|kbd|pre)$/;
/** Files that still carry words of their own, with how many at most. The list can only shrink. */
const LEFT: Record<string, number> = {};

const isProse = (text: string): boolean => /\p{L}{2,}/u.test(text) && !EVERYWHERE.test(text.trim());

/** The markup of an .astro file as TSX: without its frontmatter's fences, scripts, styles, comments. */
function markupOf(file: string, text: string): string {
  if (!file.endsWith('.astro')) return text;
  const body = text
    .replace(/^\s*---\r?\n[\s\S]*?\r?\n---/, '')
    .replace(/<(script|style)\b[^>]*?(\/>|>[\s\S]*?<\/\1>)/g, '')
    .replace(/<!doctype[^>]*>|<!--[\s\S]*?-->/gi, '');
  return `<>${body}</>`;
}

/** Words that stand in markup itself: its text, attributes that are read, strings that an expression shows. */
function wordsIn(file: string, text: string): string[] {
  const found: string[] = [];
  const source = ts.createSourceFile(
    `${file}.tsx`,
    markupOf(file, text),
    ts.ScriptTarget.Latest,
    true,
    ts.ScriptKind.TSX,
  );
  const take = (words: string): void => {
    if (isProse(words)) found.push(words.trim().replace(/\s+/g, ' '));
  };
  /** Strings that an expression gives as they are, or one of. */
  const shown = (node: ts.Expression): void => {
    if (ts.isStringLiteralLike(node)) take(node.text);
    else if (ts.isTemplateExpression(node))
      take([node.head.text, ...node.templateSpans.map((s) => s.literal.text)].join(' '));
    else if (ts.isParenthesizedExpression(node)) shown(node.expression);
    else if (ts.isConditionalExpression(node)) [node.whenTrue, node.whenFalse].forEach(shown);
    else if (ts.isBinaryExpression(node) && /^(&&|\|\||\?\?)$/.test(node.operatorToken.getText(source)))
      shown(node.right);
  };
  const visit = (node: ts.Node): void => {
    if (ts.isJsxElement(node) && CODE.test(node.openingElement.tagName.getText(source))) return;
    if (ts.isJsxText(node)) take(node.text);
    else if (ts.isJsxExpression(node) && node.expression && !ts.isJsxAttribute(node.parent))
      shown(node.expression);
    else if (ts.isJsxAttribute(node) && READ.has(node.name.getText(source)) && node.initializer) {
      if (ts.isStringLiteral(node.initializer)) take(node.initializer.text);
      else if (ts.isJsxExpression(node.initializer) && node.initializer.expression)
        shown(node.initializer.expression);
    }
    ts.forEachChild(node, visit);
  };
  visit(source);
  return found;
}

describe('what people read', () => {
  const markup = sources().filter(
    ({ file }) => /^src\/.*\.(tsx|astro)$/.test(file) && !file.startsWith('src/words/') && !isTest(file),
  );

  it('stands in src/words, not in markup', () => {
    const found = markup
      .map(({ file, text }) => ({ file, words: wordsIn(file, text) }))
      .filter(({ file, words }) => words.length > (LEFT[file] ?? 0));
    expect(found).toEqual([]);
  });

  it('that is left in markup is counted exactly', () => {
    const counts = Object.fromEntries(
      markup.filter(({ file }) => file in LEFT).map(({ file, text }) => [file, wordsIn(file, text).length]),
    );
    expect(counts).toEqual(LEFT);
  });

  it('is seen wherever markup may carry it', () => {
    expect(
      wordsIn(
        'x.tsx',
        `const a = <p title="A tip" className="mt-2">Hello{busy ? 'Sending' : <b>{\`\${n} sent\`}</b>} <code>npm start</code> 5 kWh <i>kWh</i></p>;`,
      ),
    ).toEqual(['A tip', 'Hello', 'Sending', 'sent', '5 kWh']);
    expect(
      wordsIn(
        'x.astro',
        `---\nconst words = 'No markup';\n---\n<h1>{words}</h1><script>const a = 'no';</script>Yes`,
      ),
    ).toEqual(['Yes']);
  });
});

describe('another language', () => {
  const languages = fs
    .readdirSync(path.join(ROOT, 'src/words'), { withFileTypes: true })
    .filter((entry) => entry.isDirectory())
    .map((entry) => entry.name);
  const filesIn = (folder: string) =>
    fs
      .readdirSync(path.join(ROOT, folder))
      .filter((name) => name.endsWith('.ts') && !isTest(name))
      .sort();

  it('has every file of src/words', () => {
    for (const name of languages)
      expect({ name, files: filesIn(`src/words/${name}`) }).toEqual({ name, files: filesIn('src/words') });
  });
});
