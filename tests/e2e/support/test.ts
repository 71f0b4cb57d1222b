import { expect, test as base, type BrowserContext, type Page } from '@playwright/test';
import { signIn, type DemoName } from './api.ts';

/** Watches everything that a page says and asks for. What a test expects to go wrong is allowed by name, nothing else. */
export interface Watch {
  /** A message that this test makes happen on purpose (the browser itself writes a refused request to the console). */
  allow(message: RegExp): void;
  watch(context: BrowserContext, origin: string): void;
}

interface Fixtures {
  watch: Watch;
  /** An empty window of its own: no cookies, no local copies; on the demo unless another server is named. */
  newWindow: (origin?: string) => Promise<Page>;
  /** A window of its own for a person of the demo team, signed in through the API. */
  as: (name: DemoName) => Promise<Page>;
}

/** Where no graphics card is, the browser tells that reading pixels is slow. */
const DRAWN_IN_SOFTWARE = /GL Driver Message .*Performance/;

/** Tests read the drawing through the table's own hook, which is there where this is set. */
const showHook = () => {
  if (location.protocol.startsWith('http')) localStorage.setItem('combwright.test', '1'); // about:blank has no storage
};

export const test = base.extend<Fixtures>({
  watch: [
    async ({ context, baseURL }, provide) => {
      const problems: string[] = [];
      const allowed: RegExp[] = [];
      const watcher: Watch = {
        allow: (message) => void allowed.push(message),
        watch(watched, origin) {
          watched.on('console', (message) => {
            const isOwn =
              message.type() === 'error' || (message.type() === 'warning' && !DRAWN_IN_SOFTWARE.test(message.text()));
            if (isOwn) problems.push(`${message.type()}: ${message.text()} (${message.location().url})`);
          });
          watched.on('weberror', (error) =>
            problems.push(`page error: ${error.error().stack ?? error.error().message}`),
          );
          watched.on('request', (request) => {
            const url = new URL(request.url());
            if (url.origin !== origin && !['data:', 'blob:'].includes(url.protocol))
              problems.push(`left the origin: ${request.url()}`);
          });
        },
      };
      watcher.watch(context, baseURL!);
      await context.addInitScript(showHook);
      await provide(watcher);
      expect(
        problems.filter((problem) => !allowed.some((one) => one.test(problem))),
        'console errors, page errors and requests to elsewhere',
      ).toEqual([]);
    },
    { auto: true },
  ],
  newWindow: async ({ browser, watch, baseURL }, provide) => {
    const contexts: BrowserContext[] = [];
    await provide(async (origin = baseURL!) => {
      const context = await browser.newContext({ baseURL: origin });
      contexts.push(context);
      watch.watch(context, origin);
      await context.addInitScript(showHook);
      return context.newPage();
    });
    for (const context of contexts) await context.close();
  },
  as: async ({ newWindow, baseURL }, provide) => {
    await provide(async (name) => {
      const page = await newWindow();
      await signIn(page.context().request, baseURL!, name);
      return page;
    });
  },
});

export { expect };
