import fs from 'node:fs';
import path from 'node:path';
import ts from 'typescript';
import { ROOT } from '../architecture/sources';

const WORDS = path.join(ROOT, 'src/words');
/** What every text of the language begins and ends with. */
export const OPEN = '⟦';
export const CLOSE = '⟧';

/** Names of states and kinds that a sentence chooses by, keys, and what a function is called with are no texts. */
function isText(node: ts.Node): boolean {
  const { parent } = node;
  if (ts.isImportDeclaration(parent) || ts.isExportDeclaration(parent) || ts.isLiteralTypeNode(parent))
    return false;
  if (ts.isPropertyAssignment(parent) && parent.name === node) return false;
  if (ts.isCaseClause(parent) || ts.isElementAccessExpression(parent)) return false;
  if (ts.isBinaryExpression(parent)) return /^(\+|\?\?|\|\|)$/.test(parent.operatorToken.getText());
  if (ts.isCallExpression(parent)) return false;
  return true;
}

const marked = (text: string): string => (/\p{L}{2}/u.test(text) ? `${OPEN}${text}${CLOSE}` : text);

/** A file of src/words in the language: its texts marked, its imports where ours are. */
function translated(file: string, text: string): string {
  const source = ts.createSourceFile(file, text, ts.ScriptTarget.Latest, true);
  const edits: { from: number; to: number; by: string }[] = [];
  const visit = (node: ts.Node): void => {
    if (ts.isImportDeclaration(node) && ts.isStringLiteral(node.moduleSpecifier)) {
      const { text: to } = node.moduleSpecifier;
      // words of words are the language's own; the rest is ours, seen from elsewhere
      if (to.startsWith('../'))
        edits.push({
          from: node.moduleSpecifier.getStart(source),
          to: node.moduleSpecifier.getEnd(),
          by: JSON.stringify(path.resolve(WORDS, to)),
        });
      return;
    }
    if (ts.isStringLiteral(node) && isText(node))
      edits.push({
        from: node.getStart(source),
        to: node.getEnd(),
        by: JSON.stringify(marked(node.text)),
      });
    else if (ts.isTemplateExpression(node)) {
      edits.push({ from: node.getStart(source) + 1, to: node.getStart(source) + 1, by: OPEN });
      edits.push({ from: node.getEnd() - 1, to: node.getEnd() - 1, by: CLOSE });
      node.templateSpans.forEach((span) => visit(span.expression));
      return;
    }
    ts.forEachChild(node, visit);
  };
  visit(source);
  return edits
    .sort((a, b) => b.from - a.from)
    .reduce((done, { from, to, by }) => done.slice(0, from) + by + done.slice(to), text);
}

/** Writes a language into a folder: every text of src/words in brackets, and nothing else changed. */
export function writePseudoLanguage(folder: string): string[] {
  const files = fs.readdirSync(WORDS).filter((name) => name.endsWith('.ts') && !name.endsWith('.test.ts'));
  for (const name of files) {
    const text = fs.readFileSync(path.join(WORDS, name), 'utf8');
    const said =
      name === 'language.ts'
        ? text.replace(/LANGUAGE = '\w+'/, `LANGUAGE = 'qps'`) // BCP 47's range for one's own use
        : translated(name, text);
    fs.writeFileSync(path.join(folder, name), said);
  }
  return files;
}
