import fs from 'node:fs';
import path from 'node:path';
import ts from 'typescript';
import { describe, expect, it } from 'vitest';
import { isTest, parse, ROOT, sources } from './sources';

/** Attributes that people read or hear. */
const READ = new Set(
  'title label alt placeholder hint caption aside heading finding sentence note legend strong words doneWords blocked error aria-label aria-description'.split(
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
    else if (ts.isJsxAttribute(node) && node.name.getText(source) === 'name') {
      // a form's own names are small; a fact's name is read
      if (node.initializer && ts.isStringLiteral(node.initializer) && /^\p{Lu}/u.test(node.initializer.text))
        take(node.initializer.text);
    } else if (ts.isJsxAttribute(node) && READ.has(node.name.getText(source)) && node.initializer) {
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
        `const a = <p title="A tip" className="mt-2" name="alike">Hello{busy ? 'Sending' : <b>{\`\${n} sent\`}</b>} <code>npm start</code> 5 kWh <i>kWh</i></p>;`,
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

/**
 * What is English on purpose: what loggers and programs are told, what the start and the measures say to whoever runs
 * the installation; and what a file of somebody else may call a column, samples for tests, names that are data.
 */
const ON_PURPOSE = [
  /^src\/server\/(v1|ingest|queries|db|up|observe|cli)\//,
  /^src\/server\/config\.ts$/,
  /^src\/schemas\/api\/v1\//,
  /^src\/domain\/(commissioning\/import\/columns|history-import\/match|equipment\/(heads|starter))\.ts$/,
  /\/sample-[a-z]+\.ts$/,
];
/** The same in every language: categories of IEC 61010, a typeface, a system's own name. */
const NO_WORDS = /^CAT I+V?$|sans-serif$|^Mac OS X$/;
/** Literals that look like words and are none: keys, and ranges in errors of a caller. How many, in which file. */
const KEYS: Record<string, number> = {
  'src/domain/output/resistance.ts': 3,
  'src/domain/output/yields.ts': 2,
  'src/domain/photovoltaics/irradiance/air-mass.ts': 1,
  'src/domain/photovoltaics/irradiance/clear-detection.ts': 1,
};
const LOGS = new Set(['log', 'console']);
const ERRORS = new Set(['Error', 'RangeError', 'TypeError']);

const isCalled = (node: ts.Expression, names: ReadonlySet<string>): boolean =>
  ts.isIdentifier(node) && names.has(node.text);

/** Literals in code that a person would read, as far as their looks tell. */
function sentencesIn(file: string, text: string, looks: RegExp): string[] {
  const found: string[] = [];
  const take = (words: string): void => {
    const said = words.trim().replace(/\s+/g, ' ');
    if (looks.test(said) && !NO_WORDS.test(said)) found.push(said);
  };
  const visit = (node: ts.Node): void => {
    if (ts.isImportDeclaration(node) || ts.isTypeNode(node)) return;
    // errors of a caller in code, and logs
    if (ts.isThrowStatement(node) && ts.isNewExpression(node.expression))
      if (isCalled(node.expression.expression, ERRORS)) return;
    if (ts.isCallExpression(node) && ts.isPropertyAccessExpression(node.expression))
      if (isCalled(node.expression.expression, LOGS)) return;
    if (ts.isJsxAttribute(node) && ts.isIdentifier(node.name) && /class/i.test(node.name.text)) return;
    if (ts.isStringLiteralLike(node)) take(node.text);
    else if (ts.isTemplateExpression(node)) {
      take(node.head.text);
      for (const span of node.templateSpans) take(span.literal.text);
    }
    ts.forEachChild(node, visit);
  };
  visit(parse(file, text));
  return found;
}

/** Begins like a sentence, or ends like one, in two words at least. */
const A_SENTENCE = /^["“(]?\p{Lu}\p{Ll}+,? \p{L}{2,}|\p{L}{2,} .*\p{L}{2,}[.!?]$/u;
/** Whether a file can have one: a capital after a mark of a literal, or a literal's mark after a full stop. */
const MAY_HAVE_ONE = /['"`}]\s*["“(]?\p{Lu}\p{Ll}+,? \p{L}|\p{L}[.!?]\s*(['"`]|\$\{)/u;
/** Two words in a row. */
const WORDS = /\p{L}{2,},? \p{L}{2,}/u;

const left = (folder: RegExp, looks: RegExp, mayHave: RegExp) =>
  sources()
    .filter(({ file }) => /\.(tsx?|astro)$/.test(file) && folder.test(file) && !isTest(file))
    .filter(({ file, text }) => !ON_PURPOSE.some((on) => on.test(file)) && mayHave.test(text))
    .map(({ file, text }) => ({ file, words: sentencesIn(file, text, looks) }))
    .filter(({ file, words }) => words.length !== (KEYS[file] ?? 0));

describe('what code would say', () => {
  it('stands in src/words, not in code', () => {
    expect(left(/^src\/(?!words\/|domain\/)/, A_SENTENCE, MAY_HAVE_ONE)).toEqual([]);
  });

  it('stands in src/words, not in the domain', () => {
    expect(left(/^src\/domain\//, WORDS, WORDS)).toEqual([]);
  });

  it('is seen in literals and templates, where it is no error of a caller', () => {
    const text = `import a from './some file.';
      const b = 'No roof is drawn.'; const c = \`Units of \${b} pass on.\`; log.warn('The worker ended.');
      if (b) throw new RangeError('Nobody reads this.'); const d = 'flex gap-2';`;
    expect(sentencesIn('x.ts', text, A_SENTENCE)).toEqual(['No roof is drawn.', 'Units of', 'pass on.']);
    expect(sentencesIn('x.ts', `const e = 'passes on'; const f = 'passing';`, WORDS)).toEqual(['passes on']);
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
