// Who may import whom. Each rule is broken once on purpose in tests/unit/rules and seen to fail.
const at = (path) => (typeof path === 'string' ? { path } : path);
const never = (name, from, to) => ({ name, severity: 'error', from: at(from), to: at(to) });
// Everything but the room itself and what is allowed; Node's own modules are caught too.
const only = (name, from, ...allowed) => never(name, from, { pathNot: [from, ...allowed] });
const synth = '^lib/synth/index\\.ts$';
const documentRoom = '^lib/document/';
const pkg = (...names) => `node_modules/(${names.join('|')})/`;

module.exports = {
  forbidden: [
    never('no-circular', {}, { circular: true }),
    never('no-unresolvable', {}, { couldNotResolve: true }),
    never('no-undeclared-package', {}, { dependencyTypes: ['npm-no-pkg', 'npm-unknown'] }),
    never('no-dev-package-in-product', '^(app|components|lib|server|db)/', {
      dependencyTypes: ['npm-dev'],
      pathNot: 'node_modules/@types/',
    }),
    only('synth-imports-only-synth', '^lib/synth/', pkg('fft\\.js')),
    only('document-imports-only-zod-and-synth', documentRoom, synth, pkg('zod', 'canonicalize', '@noble/hashes')),
    only('contracts-import-only-zod-and-document', '^lib/contracts/', documentRoom, synth, pkg('zod')),
    only('drawing-imports-only-synth-and-scales', '^lib/drawing/', synth, pkg('d3-[a-z]+', '@types/d3-[a-z]+')),
    only('editor-has-no-ui', '^lib/editor/', synth, documentRoom, '^lib/drawing/', pkg('zustand', '@noble/hashes')),
    never(
      'no-import-of-synth-internals',
      { path: '.', pathNot: '^(lib/synth|tests)/' },
      { path: '^lib/synth/', pathNot: synth },
    ),
    never(
      'skia-only-in-canvas',
      { path: '^(app|components|lib|server|db)/', pathNot: '^components/canvas/' },
      'node_modules/(@shopify/react-native-skia|canvaskit-wasm)/',
    ),
    never(
      'canvas-behind-the-gate',
      { path: '.', pathNot: '^(components/canvas|tests)/' },
      { path: '^components/canvas/', pathNot: '/CanvasGate\\.tsx$', dependencyTypesNot: ['type-only'] },
    ),
    never('engine-loaded-lazily', '/CanvasGate\\.tsx$', {
      path: '^components/canvas/',
      dependencyTypesNot: ['type-only', 'dynamic-import'],
    }),
    never('app-never-imported', { path: '.', pathNot: '^(app|tests)/' }, '^app/'),
    never(
      'ui-knows-no-feature',
      '^components/ui/',
      '^(components/(screens|canvas|live)|lib/(client|editor|contracts|document)|app)/',
    ),
    never('client-never-reaches-server-or-db', '^(app|components|lib)/', { path: '^(server|db)/', reachable: true }),
    never('server-has-no-client', '^(server|db)/', '^(app|components|lib/(client|editor))/'),
    never(
      'drizzle-only-in-db-and-repos',
      {
        path: '.',
        pathNot: '^(db/|server/.*[rR]epo\\.ts$|server/auth/hashedIdAdapter\\.ts$|drizzle\\.config\\.ts$|tests/)',
      },
      pkg('drizzle-orm', '@lucia-auth/adapter-drizzle'),
    ),
    never('routes-not-to-repo', '^server/features/[^/]+/routes\\.ts$', '[rR]epo\\.ts$'),
    never('repo-not-back', '[rR]epo\\.ts$', '^server/features/[^/]+/(routes|service)\\.ts$'),
    never('tests-never-imported', { path: '.', pathNot: '^tests/' }, '^tests/'),
  ],
  options: {
    tsPreCompilationDeps: true, // type imports count
    combinedDependencies: true, // else a package.json with a type alone makes each package below it look undeclared
    tsConfig: { fileName: 'tsconfig.json' }, // the @/* alias
    doNotFollow: { path: 'node_modules' },
    exclude: { path: ['^tests/fixtures/', '^lib/synth/assembly/', '\\.(ttf|css)$'] },
    enhancedResolveOptions: { exportsFields: ['exports'], conditionNames: ['import', 'require', 'default', 'types'] },
  },
};
