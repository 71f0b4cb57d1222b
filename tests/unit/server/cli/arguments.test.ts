import { parseCommand } from '@/server/cli/arguments';

test('the three commands', () => {
  expect(parseCommand(['render', 'a.json', 'b.json', '--out', 'c.zip'])).toEqual({
    ok: true,
    command: { name: 'render', document: 'a.json', bench: 'b.json', out: 'c.zip', json: false },
  });
  expect(parseCommand(['--json', 'render', 'a.json', 'b.json'])).toEqual({
    ok: true,
    command: { name: 'render', document: 'a.json', bench: 'b.json', out: null, json: true },
  });
  expect(parseCommand(['verify', 'c.zip'])).toEqual({
    ok: true,
    command: { name: 'verify', pack: 'c.zip', json: false },
  });
  expect(parseCommand(['inspect', 'a.json', '--json'])).toEqual({
    ok: true,
    command: { name: 'inspect', document: 'a.json', json: true },
  });
  expect(parseCommand(['fit', 'a.json', 'b.json', '--out', 'c.json'])).toEqual({
    ok: true,
    command: { name: 'fit', document: 'a.json', bench: 'b.json', out: 'c.json', json: false },
  });
  expect(parseCommand(['render', '--help'])).toEqual({ ok: true, command: { name: 'help' } });
});

test.each([
  [[], 'A command is missing'],
  [['paint'], 'There is no command "paint"'],
  [['render', 'a.json'], 'render takes a document and a bench profile'],
  [['render', 'a', 'b', 'c'], 'render takes a document and a bench profile'],
  [['render', 'a', 'b', '--out='], '--out needs a file name'],
  [['fit', 'a.json'], 'fit takes a document and a bench profile'],
  [['verify'], 'verify takes one pack'],
  [['verify', 'a', 'b'], 'verify takes one pack'],
  [['inspect', 'a', '--out', 'b'], '--out belongs to render'],
  [['render', 'a', 'b', '--oops'], "Unknown option '--oops'"],
  [['render', 'a', 'b', '--out'], 'argument missing'],
])('a wrong command line says why: %j', (argv, words) => {
  const parsed = parseCommand(argv);
  expect(parsed.ok).toBe(false);
  expect(!parsed.ok && parsed.message).toContain(words);
});
