const http = require('node:http');
const path = require('node:path');
const { getDefaultConfig } = require('expo/metro-config');
const config = getDefaultConfig(__dirname);
// Not part of the app bundle. Anchored at the root: an unanchored /dist/ would also block node_modules/*/dist.
const here = (dir) => new RegExp('^' + path.join(__dirname, dir).replace(/[.*+?^${}()|[\]\\]/g, '\\$&') + '[\\\\/].*');
config.resolver.blockList = [
  ...[config.resolver.blockList ?? []].flat(),
  ...['server', 'db', 'tests', 'dist', 'dist.next', 'dist.old', 'build', 'data', 'tools', 'test-results'].map(here),
];
const upstream = config.resolver.resolveRequest;
config.resolver.resolveRequest = (context, name, platform) => {
  const from = context.originModulePath;
  // zod 4's main entry re-exports all its 50 locales (270 KB raw): keep only English, which it imports by itself.
  if (name.endsWith('/locales/index.js') && /[\\/]zod[\\/]v4[\\/]/.test(from)) return { type: 'empty' };
  // Skia takes Reanimated when it is there (half of its chunk); a canvas drawn by hand needs none of it.
  if (/^react-native-(reanimated|worklets)(\/|$)/.test(name) && /[\\/]@shopify[\\/]react-native-skia[\\/]/.test(from))
    return { type: 'empty' };
  return (upstream ?? context.resolveRequest)(context, name, platform);
};
// Dev only: one origin. /api goes to the Express server.
config.server = {
  ...config.server,
  enhanceMiddleware: (metro) => (req, res, next) => {
    if (!req.url.startsWith('/api')) return metro(req, res, next);
    const to = {
      host: '127.0.0.1',
      port: Number(process.env.API_PORT ?? 8080),
      path: req.url,
      method: req.method,
      headers: req.headers,
    };
    const up = http.request(to, (r) => {
      res.writeHead(r.statusCode ?? 502, r.headers);
      r.pipe(res);
    });
    up.on('error', () => {
      res.writeHead(502).end('API is not running');
    });
    req.pipe(up);
  },
};
module.exports = config;
