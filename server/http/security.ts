import helmet from 'helmet';
import type { Config } from '../config.ts';

/** Nothing of a page comes from elsewhere or goes elsewhere; WebAssembly is allowed, inline script is not. */
export function securityHeaders(config: Config) {
  const isHttps = config.publicOrigin?.startsWith('https:') ?? false;
  return helmet({
    contentSecurityPolicy: {
      useDefaults: false, // the defaults upgrade to https, which a plain-http installation does not have
      directives: {
        defaultSrc: ["'self'"],
        scriptSrc: ["'self'", "'wasm-unsafe-eval'"],
        styleSrc: ["'self'", "'unsafe-inline'"], // react-native-web writes its sheet into the page
        imgSrc: ["'self'", 'data:', 'blob:'],
        fontSrc: ["'self'"],
        connectSrc: ["'self'"],
        workerSrc: ["'self'"],
        objectSrc: ["'none'"],
        baseUri: ["'none'"],
        formAction: ["'self'"],
        frameAncestors: ["'none'"],
      },
    },
    strictTransportSecurity: isHttps ? { maxAge: 15_552_000 } : false,
    // Ignored with a warning on plain http other than localhost.
    crossOriginOpenerPolicy: isHttps ? { policy: 'same-origin' } : false,
    originAgentCluster: isHttps,
    referrerPolicy: { policy: 'same-origin' },
    xFrameOptions: { action: 'deny' },
  });
}
