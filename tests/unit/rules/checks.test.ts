import { readFileSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import ts from 'typescript';
import ids from '@/tests/fixtures/checkIds.json';
import { readCheck } from '@/tests/helpers/checks';

const tests = join(__dirname, '../..');
const callers = new Set(['testCheck', 'testChecks', 'describeCheck']);

const sources = readdirSync(tests, { recursive: true, encoding: 'utf8' })
  .filter((path) => /\.(test|spec)\.tsx?$/.test(path))
  .sort()
  .map((path) => ({
    path,
    file: ts.createSourceFile(path, readFileSync(join(tests, path), 'utf8'), ts.ScriptTarget.Latest, true),
  }));

function visit(node: ts.Node, see: (node: ts.Node) => void): void {
  see(node);
  node.forEachChild((child) => visit(child, see));
}

/** The texts of a literal, of a list of literals, or of a list that a const of the file names. */
function literalsOf(node: ts.Node | undefined, file: ts.SourceFile): string[] {
  if (!node) return [];
  if (ts.isStringLiteralLike(node)) return [node.text];
  if (ts.isArrayLiteralExpression(node)) return node.elements.flatMap((element) => literalsOf(element, file));
  if (!ts.isIdentifier(node)) return [];
  const found: string[] = [];
  visit(file, (other) => {
    if (ts.isVariableDeclaration(other) && other.name.getText(file) === node.text)
      found.push(...literalsOf(other.initializer, file));
  });
  return found;
}

test('every check value has a named test', () => {
  const named = new Set<string>();
  for (const { file } of sources) {
    visit(file, (node) => {
      if (ts.isCallExpression(node) && ts.isIdentifier(node.expression) && callers.has(node.expression.text))
        for (const id of literalsOf(node.arguments[0], file)) named.add(id);
    });
  }
  expect(ids).toHaveLength(73);
  expect(ids.filter((id) => !named.has(id))).toEqual([]);
  expect([...named].filter((id) => !ids.includes(id))).toEqual([]);
});

test.each(ids)('%s says where it comes from', (id) => {
  const check = readCheck(id);
  expect(check.id).toBe(id);
  expect(check.source.length).toBeGreaterThan(5);
  expect(['confirmed', 'from memory', 'computed']).toContain(check.confidence);
});

test('no test is skipped, left for later or run alone', () => {
  const away: string[] = [];
  for (const { path, file } of sources) {
    visit(file, (node) => {
      if (!ts.isCallExpression(node)) return;
      const called = node.expression.getText(file);
      if (/^(xit|xtest|xdescribe|fit|fdescribe)(\.each\b.*)?$/s.test(called)) away.push(`${path}: ${called}`);
      if (/^(it|test|describe)\b.*\.(skip|todo|only|fixme)\b/s.test(called))
        away.push(`${path}: ${called.slice(0, 40)}`);
    });
  }
  expect(away).toEqual([]);
});
