// Two projects: everything without a screen in plain Node, components in jsdom with the web platform's resolution.
const esm = [
  '(jest-)?react-native[^/]*',
  '@react-native[^/]*/[^/]+',
  'expo[^/]*',
  '@expo[^/]*/[^/]+',
  '@rn-primitives/[^/]+',
  '@shopify/react-native-skia',
  '@tanstack/[^/]+',
  'd3-[a-z-]+',
  'internmap',
  'standard-navigation',
  'archiver',
  'zip-stream',
  'compress-commons',
  'crc32-stream',
  'is-stream', // from here on: ESM only
  'lucia',
  '@oslojs/[^/]+',
  '@lucia-auth/[^/]+',
  'nodemailer',
  'canonicalize',
  '@noble/[^/]+',
].join('|');
function project(name, presetPath, extra) {
  const { watchPlugins: _watch, ...preset } = require(presetPath); // not allowed per project
  return {
    ...preset,
    displayName: name,
    moduleNameMapper: {
      ...preset.moduleNameMapper,
      '^@/(.*)$': '<rootDir>/$1',
      '^canonicalize$': '<rootDir>/node_modules/canonicalize/lib/canonicalize.js', // its exports know only "import"
    },
    // d3-array 3.2.5 (and others) ship .mjs, which the preset's pattern does not transform
    transform: { ...preset.transform, '\\.mjs$': preset.transform['\\.[jt]sx?$'] },
    moduleFileExtensions: [...new Set([...preset.moduleFileExtensions, 'mjs'])],
    transformIgnorePatterns: [
      `/node_modules/(?!(${esm})/)`,
      '/node_modules/react-native-(reanimated|worklets)/plugin/',
    ],
    ...extra,
  };
}
module.exports = {
  projects: [
    project('node', 'jest-expo/node/jest-preset', {
      testMatch: ['<rootDir>/tests/{unit,property,golden,api,visual}/**/!(*.web).test.ts'],
      setupFiles: [],
    }),
    // what users get: react-native-web in a DOM, with @testing-library/react
    project('web', 'jest-expo/web/jest-preset', {
      testMatch: ['<rootDir>/tests/unit/**/*.web.test.tsx'],
      setupFilesAfterEnv: ['<rootDir>/jest.setup.ts'],
    }),
  ],
};
