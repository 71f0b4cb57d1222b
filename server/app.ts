import compression from 'compression';
import express, { Router, type Express } from 'express';
import { createSessions } from './auth/sessions.ts';
import type { Deps } from './deps.ts';
import { createEvents } from './events.ts';
import { mountAudit } from './features/audit/routes.ts';
import { mountAuth } from './features/auth/routes.ts';
import { mountBenches } from './features/benches/routes.ts';
import { mountEditions } from './features/editions/routes.ts';
import { createPacks } from './features/packs/packs.ts';
import { mountPeople } from './features/people/routes.ts';
import { mountReviews } from './features/reviews/routes.ts';
import { mountWaveforms } from './features/waveforms/routes.ts';
import { createFigures } from './figures/figures.ts';
import { createMeasureThread, type Measuring } from './figures/measureThread.ts';
import { answerErrors } from './http/errorHandler.ts';
import { createMount } from './http/mount.ts';
import { requireOwnOrigin } from './http/origin.ts';
import { nameRequests } from './http/requestContext.ts';
import { securityHeaders } from './http/security.ts';
import { servePage } from './http/staticFiles.ts';
import { DomainError } from './problem.ts';

/** The whole server but the listening. */
export function createApp(deps: Deps, measuring: Measuring = createMeasureThread(deps.config.buildDir)): Express {
  const app = express();
  app.disable('x-powered-by');
  app.set('trust proxy', deps.config.trustsProxy ? 1 : false);
  app.set('query parser', 'simple');
  app.use(nameRequests(deps), securityHeaders(deps.config), compression());

  // Bare: no session, no log noise worth filtering, no database.
  app.get('/api/health', (_request, response) => {
    if (deps.lifecycle.isStopping) throw new DomainError('stopping');
    response.setHeader('Cache-Control', 'no-store');
    response.json({ status: 'ok' });
  });

  const api = Router();
  const sessions = createSessions(deps);
  const mount = createMount(api, deps, sessions.readActor);
  mountAuth(mount, deps, sessions);
  mountPeople(mount, deps);
  mountAudit(mount, deps);
  const events = createEvents((error) => deps.log.error({ err: error }, 'a listener failed'));
  const figures = createFigures(deps, measuring);
  mountWaveforms(mount, deps, figures);
  mountReviews(mount, deps);
  mountEditions(mount, deps, events);
  mountBenches(mount, deps, figures);
  const packs = createPacks(deps, mount, events, sessions.readActor);
  app.use(requireOwnOrigin(deps), api);
  app.use('/api', () => {
    throw new DomainError('not_found');
  });

  app.use(packs.page);
  app.use(servePage(deps.config.webDir));
  app.use(answerErrors);
  return app;
}
