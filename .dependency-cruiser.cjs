const never = (name, from, to) => ({ name, severity: 'error', from: typeof from === 'string' ? { path: from } : from, to: typeof to === 'string' ? { path: to } : to });
const only = (name, from, ...allowed) => never(name, from, { pathNot: [from, ...allowed] }); // node: modules are caught too
const synth = '^lib/synth/index\\.ts$';
module.exports = {
  forbidden: [
    never('no-circular', {}, { circular: true }),
    never('no-unresolvable', {}, { couldNotResolve: true }),
    never('no-undeclared-package', {}, { dependencyTypes: ['npm-no-pkg', 'npm-unknown'] }),
    only('synth-imports-only-synth', '^lib/synth/', 'node_modules/fft\\.js/'),
    only('document-imports-only-zod-and-synth', '^lib/document/', synth, 'node_modules/(zod|canonicalize|@noble/hashes)/'), // contracts, editor alike
    never('no-import-of-synth-internals', { path: '.', pathNot: '^(lib/synth|tests)/' }, { path: '^lib/synth/', pathNot: synth }),
    never('skia-only-in-canvas', { path: '^(app|components|lib|server|db)/', pathNot: '^components/canvas/' }, 'node_modules/(@shopify/react-native-skia|canvaskit-wasm)/'),
    never('canvas-behind-the-gate', { path: '.', pathNot: '^(components/canvas|tests)/' }, { path: '^components/canvas/', pathNot: '/CanvasGate\\.tsx$' }),
    never('engine-loaded-lazily', '/CanvasGate\\.tsx$', { path: '^components/canvas/', dependencyTypesNot: ['type-only', 'dynamic-import'] }),
    never('client-never-reaches-server-or-db', '^(app|components|lib)/', { path: '^(server|db)/', reachable: true }),
    // the others, and no-dev-package-in-product (dependencyTypes npm-dev, pathNot node_modules/@types/): plain never(…)
  ],
  options: {
    tsPreCompilationDeps: true, // type imports count, import('…').T too
    combinedDependencies: true, // else a package.json with a type alone makes each package below it look undeclared
    tsConfig: { fileName: 'tsconfig.json' }, // the @/* alias
    doNotFollow: { path: 'node_modules' }, exclude: { path: '^lib/synth/assembly/' },
    enhancedResolveOptions: { exportsFields: ['exports'], conditionNames: ['import', 'require', 'default', 'types'] }, // not read otherwise
  },
};
