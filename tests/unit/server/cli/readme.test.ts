import { readFileSync } from 'node:fs';
import path from 'node:path';
import { helpText, parseCommand } from '@/server/cli/arguments';

const readme = readFileSync(path.join(__dirname, '../../../../README.md'), 'utf8');
const section = /## Command line\n([\s\S]*?)\n## /.exec(readme)?.[1] ?? '';
const inHelp = [...helpText.matchAll(/^ {2}combwright (\w+)/gm)].map((found) => found[1]!);
const lines = [...section.matchAll(/^npx combwright (.+)$/gm)].map((found) => found[1]!.trim().split(/\s+/));

test('the README shows every command of the help, and no other', () => {
  expect(inHelp.length).toBeGreaterThan(4);
  expect([...new Set(lines.map(([name]) => name))].sort()).toEqual([...inHelp].sort());
});

test.each(lines.map((line) => [line.join(' '), line] as const))('%s is a right command line', (_text, line) => {
  expect(parseCommand(line)).toMatchObject({ ok: true, command: { name: line[0] } });
});

test('every option that the README names is in the help, and the commands that a wrong line lists are all', () => {
  const named = [...section.matchAll(/--[a-z-]+/g)].map(([option]) => option);
  expect(named.filter((option) => !helpText.includes(option))).toEqual([]);
  const missing = parseCommand([]);
  if (missing.ok) throw new Error('no command was taken');
  for (const name of inHelp) expect(missing.message).toContain(name);
});
