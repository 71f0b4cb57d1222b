import { spawnSync } from 'node:child_process';
import { mkdirSync, mkdtempSync, rmSync, symlinkSync, writeFileSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';

const root = path.resolve(__dirname, '../../..');

/** A small tree for each rule that breaks it, and nothing else that matters. */
const broken: Record<string, Record<string, string>> = {
  'no-circular': {
    'lib/a.ts': "import { b } from './b';\nexport const a = () => b;",
    'lib/b.ts': "import { a } from './a';\nexport const b = () => a;",
  },
  'no-unresolvable': { 'lib/a.ts': "import './nowhere';" },
  'no-undeclared-package': { 'lib/a.ts': "import picomatch from 'picomatch';\nexport const a = picomatch;" },
  'no-dev-package-in-product': { 'lib/a.ts': "import fc from 'fast-check';\nexport const a = fc;" },
  'synth-imports-only-synth': {
    'lib/synth/index.ts': "import { readFileSync } from 'node:fs';\nexport const a = readFileSync;",
  },
  'document-imports-only-zod-and-synth': {
    'lib/document/a.ts': "import { createStore } from 'zustand/vanilla';\nexport const a = createStore;",
  },
  'contracts-import-only-zod-and-document': {
    'lib/contracts/a.ts': "import { createStore } from 'zustand/vanilla';\nexport const a = createStore;",
  },
  'drawing-imports-only-synth-and-scales': { 'lib/drawing/a.ts': "import { z } from 'zod';\nexport const a = z;" },
  'editor-has-no-ui': { 'lib/editor/a.ts': "import { useState } from 'react';\nexport const a = useState;" },
  'no-import-of-synth-internals': {
    'lib/synth/deep.ts': 'export const x = 1;',
    'server/a.ts': "import { x } from '../lib/synth/deep';\nexport const a = x;",
  },
  'skia-only-in-canvas': {
    'components/screens/a.ts': "import { Skia } from '@shopify/react-native-skia';\nexport const a = Skia;",
  },
  'canvas-behind-the-gate': {
    'components/canvas/GridCanvas.ts': 'export const x = 1;',
    'components/screens/a.ts': "import { x } from '../canvas/GridCanvas';\nexport const a = x;",
  },
  'engine-loaded-lazily': {
    'components/canvas/engine.ts': 'export const x = 1;',
    'components/canvas/CanvasGate.tsx': "import { x } from './engine';\nexport const a = x;",
  },
  'app-never-imported': {
    'app/index.ts': 'export const x = 1;',
    'lib/a.ts': "import { x } from '../app/index';\nexport const a = x;",
  },
  'ui-knows-no-feature': {
    'lib/client/a.ts': 'export const x = 1;',
    'components/ui/a.ts': "import { x } from '../../lib/client/a';\nexport const a = x;",
  },
  'client-never-reaches-server-or-db': {
    'server/deep.ts': 'export interface X { x: 1 }',
    'tests/between.ts': "export type { X } from '../server/deep';",
    'components/a.ts': "import type { X } from '../tests/between';\nexport const a: X = { x: 1 };",
  },
  'server-has-no-client': {
    'lib/client/a.ts': 'export const x = 1;',
    'server/a.ts': "import { x } from '../lib/client/a';\nexport const a = x;",
  },
  'drizzle-only-in-db-and-repos': {
    'server/features/x/service.ts': "import { eq } from 'drizzle-orm';\nexport const a = eq;",
  },
  'routes-not-to-repo': {
    'server/features/x/repo.ts': 'export const x = 1;',
    'server/features/x/routes.ts': "import { x } from './repo';\nexport const a = x;",
  },
  'repo-not-back': {
    'server/features/x/service.ts': 'export const x = 1;',
    'server/features/x/repo.ts': "import { x } from './service';\nexport const a = x;",
  },
  'tests-never-imported': {
    'tests/helpers/a.ts': 'export const x = 1;',
    'lib/a.ts': "import { x } from '../tests/helpers/a';\nexport const a = x;",
  },
};

function plant(files: Record<string, string>): { dir: string; rooms: string[] } {
  const dir = mkdtempSync(path.join(os.tmpdir(), 'rules-'));
  for (const name of ['package.json', 'tsconfig.json']) symlinkSync(path.join(root, name), path.join(dir, name));
  symlinkSync(path.join(root, 'node_modules'), path.join(dir, 'node_modules'));
  // the root's tsconfig.json must find a file of its own
  for (const [name, text] of Object.entries({ 'lib/keep.ts': 'export const keep = 1;', ...files })) {
    mkdirSync(path.dirname(path.join(dir, name)), { recursive: true });
    writeFileSync(path.join(dir, name), text);
  }
  return { dir, rooms: [...new Set(Object.keys(files).map((name) => name.split('/')[0]!))] };
}

/** The rules that each tree breaks. */
function brokenIn(trees: Record<string, string>[]): string[][] {
  const planted = trees.map(plant);
  try {
    const input = JSON.stringify(planted);
    const { stdout, stderr } = spawnSync(process.execPath, [path.join(__dirname, 'cruiseTrees.mjs')], {
      encoding: 'utf8',
      input,
    });
    if (stderr !== '') throw new Error(stderr);
    return JSON.parse(stdout) as string[][];
  } finally {
    for (const { dir } of planted) rmSync(dir, { recursive: true, force: true });
  }
}

describe('dependency rules', () => {
  // eslint-disable-next-line @typescript-eslint/no-require-imports -- the configuration is CommonJS
  const config = require('../../../.dependency-cruiser.cjs') as { forbidden: { name: string }[] };

  test('every rule has a tree that breaks it', () => {
    expect(config.forbidden.map((rule) => rule.name).sort()).toEqual(Object.keys(broken).sort());
  });

  const keepsAll = {
    'lib/synth/index.ts': 'export const x = 1;',
    'server/a.ts': "import { x } from '../lib/synth/index';\nexport const a = x;",
  };
  let found: string[][];
  beforeAll(() => (found = brokenIn([...Object.values(broken), keepsAll])), 60_000);

  test.each(Object.keys(broken).map((rule, at) => [rule, at] as const))('%s fails when it is broken', (rule, at) => {
    expect(found[at]).toContain(rule);
  });

  test('a tree that keeps them all passes', () => {
    expect(found.at(-1)).toEqual([]);
  });
});
