import { parseCommand } from '@/server/cli/arguments';

test('the commands and what they take', () => {
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
  expect(parseCommand(['lower', 'a.json', '--method', 'seed', '--seeds', '9', '--out', 'c.json', '--json'])).toEqual({
    ok: true,
    command: {
      name: 'lower',
      document: 'a.json',
      way: { method: 'seed', payload: null, first: null, count: 9, targetDb: null },
      out: 'c.json',
      json: true,
    },
  });
  expect(parseCommand(['lower', 'a', '--method', 'reserve', '--target', '7.5', '--out', 'c'])).toMatchObject({
    command: { way: { method: 'reserve', targetDb: 7.5, passes: 40 } },
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
  [['lower', '--method', 'clip'], 'lower takes one document'],
  [['lower', 'a', '--method', 'clip'], 'lower needs --out with a file name'],
  [['lower', 'a', '--out', 'c'], '--method is phases, seed, reserve or clip'],
  [['lower', 'a', '--out', 'c', '--method', 'clip'], '--method clip needs --target with dB over the mean'],
  [['lower', 'a', '--out', 'c', '--method', 'clip', '--target', '2'], '--target is a number from 3 to 20'],
  [['lower', 'a', '--out', 'c', '--method', 'seed', '--passes', '2'], '--passes belongs to --method reserve and clip'],
  [['lower', 'a', '--out', 'c', '--method', 'seed', '--seeds', '1.5'], '--seeds is a whole number from 1 to 10000'],
  [['lower', 'a', '--out', 'c', '--method', 'phases', '--law', 'x'], '--law is newman or schroeder'],
  [['render', 'a', 'b', '--oops'], "Unknown option '--oops'"],
  [['render', 'a', 'b', '--out'], 'argument missing'],
])('a wrong command line says why: %j', (argv, words) => {
  const parsed = parseCommand(argv);
  expect(parsed.ok).toBe(false);
  expect(!parsed.ok && parsed.message).toContain(words);
});
