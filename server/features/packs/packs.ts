import type { Router } from 'express';
import type { Deps } from '../../deps.ts';
import type { Events } from '../../events.ts';
import type { Mount, ReadActor } from '../../http/mount.ts';
import { createPackJobs, type PackJobs } from '../../packs/jobs.ts';
import { serveOperatorPage } from '../../packs/operatorPage.ts';
import { createRenderThread } from '../../packs/renderThread.ts';
import { findInstallation } from '../auth/installationRepo.ts';
import { createDownloads } from './downloads.ts';
import { mountPacks } from './routes.ts';
import { createPacksService, type PacksService } from './service.ts';

export interface Packs {
  jobs: PackJobs;
  service: PacksService;
  /** Stands before the exported page. */
  page: Router;
}

/** All that belongs to packs: jobs with their thread, service, downloads, routes and the operator's page. */
export function createPacks(deps: Deps, mount: Mount, events: Events, readActor: ReadActor): Packs {
  const jobs = createPackJobs(deps, createRenderThread(deps.config.buildDir, deps.config.renderWorkers));
  const service = createPacksService(deps, jobs);
  mountPacks(mount, service, createDownloads(events));
  const isDemo = () => findInstallation(deps.store.db)?.kind === 'demo';
  return { jobs, service, page: serveOperatorPage(deps.config.webDir, readActor, service.show, isDemo) };
}
