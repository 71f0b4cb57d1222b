const { defineConfig, globalIgnores } = require('eslint/config');
const expo = require('eslint-config-expo/flat');
const tseslint = require('typescript-eslint');
// Left to the engine by the language; sqrt, floor, ceil, trunc, round, abs, min, max, imul, clz32, fround are exact.
const inexact =
  'sin cos tan asin acos atan atan2 sinh cosh tanh asinh acosh atanh exp expm1 log log1p log2 log10 pow cbrt hypot'.split(
    ' ',
  );
const byName = 'call Math by its name, so that the ban sees it';
module.exports = defineConfig([
  globalIgnores([
    'dist*/**',
    'build/**',
    'public/**',
    '.expo/**',
    'coverage/**',
    'test-results*/**',
    'data/**',
    'tools/**',
    'lib/synth/assembly/**',
  ]),
  expo,
  {
    files: ['**/*.ts', '**/*.tsx'],
    languageOptions: {
      parser: tseslint.parser,
      parserOptions: { project: ['./tsconfig.json', './tsconfig.server.json'], tsconfigRootDir: __dirname },
    },
    rules: {
      '@typescript-eslint/no-floating-promises': 'error',
      '@typescript-eslint/no-misused-promises': 'error',
      '@typescript-eslint/await-thenable': 'error',
    },
  },
  { rules: { 'import/no-named-as-default-member': 'off' } }, // fc.assert
  {
    files: ['lib/synth/**/*.ts'],
    rules: {
      'no-restricted-properties': [
        'error',
        ...inexact.map((property) => ({ object: 'Math', property })),
        { object: 'Math', property: 'random' },
        { object: 'Date', property: 'now' },
      ],
      'no-restricted-syntax': [
        'error',
        { selector: "BinaryExpression[operator='**']", message: '** is Math.pow' },
        { selector: "AssignmentExpression[operator='**=']", message: '** is Math.pow' },
        { selector: "VariableDeclarator[init.name='Math']", message: byName },
        { selector: "MemberExpression[property.name='Math']", message: byName },
      ],
    },
  },
  {
    files: ['scripts/**', 'server/**', 'db/**', 'tests/**', '*.config.*'],
    languageOptions: {
      globals: { process: 'readonly', console: 'readonly', Buffer: 'readonly', __dirname: 'readonly' },
    },
  },
]);
