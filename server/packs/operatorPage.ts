import { readFile, stat } from 'node:fs/promises';
import path from 'node:path';
import { Router } from 'express';
import { API_PREFIX } from '@/lib/contracts/endpoint';
import { ulidSchema } from '@/lib/contracts/common';
import type { PackDetail } from '@/lib/contracts/packs';
import type { Actor } from '../auth/actor.ts';
import type { ReadActor } from '../http/mount.ts';
import { DomainError } from '../problem.ts';
import { operatorHtml, operatorStyle } from './operatorHtml.ts';

/** Where the app is not exported (tests): the same page without an app to take over. */
const bareShell =
  '<!DOCTYPE html><html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width, initial-scale=1"><title>Combwright</title></head><body><div id="root"></div></body></html>';

/** The exported page, read again when a new export took its place. */
function createShell(webDir: string): () => Promise<string> {
  const file = path.join(webDir, 'index.html');
  let known: { mtimeMs: number; html: string } | null = null;
  return async () => {
    const found = await stat(file).catch(() => null);
    if (!found) return bareShell;
    if (known?.mtimeMs !== found.mtimeMs) known = { mtimeMs: found.mtimeMs, html: await readFile(file, 'utf8') };
    return known.html;
  };
}

const place = /<div id="root">\s*<\/div>/;
const escapeTitle = (title: string) => title.replace(/&/g, '&amp;').replace(/</g, '&lt;');

const demoStyle =
  '#plain .demo{margin:0 -16px 8px;padding:2px;text-align:center;font-size:12px;color:var(--warning);background:var(--warningWash)}';

function fill(shell: string, pack: PackDetail, isDemo: boolean): string {
  const html = place.test(shell) ? shell : bareShell;
  const plain = operatorHtml(pack, `${API_PREFIX}/packs/${pack.packId}/file`);
  const card = isDemo ? plain.replace('<main>', '<main><p class="demo">Demo: invented people and data</p>') : plain;
  // Functions, since a title may hold what a replacement text gives a meaning.
  return html
    .replace(/<title>[^<]*<\/title>/, () => `<title>${escapeTitle(pack.title)}, Combwright</title>`)
    .replace('</head>', () => `<style>${operatorStyle}${isDemo ? demoStyle : ''}</style></head>`)
    .replace(place, () => `<div id="root">${card}</div>`);
}

/**
 * GET /packs/:packId: the card as plain HTML, readable before a byte of the app has come; the app then takes the element over. Who is not
 * signed in, or may not see the pack, gets the app alone, which asks to sign in or says that nothing is there.
 */
export function serveOperatorPage(
  webDir: string,
  readActor: ReadActor,
  show: (actor: Actor, packId: string) => PackDetail,
  isDemo: () => boolean,
): Router {
  const router = Router();
  const shell = createShell(webDir);
  router.get('/packs/:packId', async (request, response, next) => {
    const packId = ulidSchema.safeParse(request.params.packId);
    const actor = packId.success ? await readActor(request, response) : null;
    if (!packId.success || !actor?.rights.has('readEditions')) {
      next();
      return;
    }
    let pack: PackDetail;
    try {
      pack = show(actor, packId.data);
    } catch (error) {
      if (!(error instanceof DomainError)) throw error;
      next();
      return;
    }
    response.setHeader('Cache-Control', 'private, no-store');
    response.setHeader('Vary', 'Cookie');
    response.type('html').send(fill(await shell(), pack, isDemo()));
  });
  return router;
}
