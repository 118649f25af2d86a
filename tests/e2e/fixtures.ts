import { test as base, expect, type BrowserContext, type Page } from 'playwright/test';
import { openDatabase, type Db } from '~/server/db/client';
import { Mailbox } from './mailbox';
import { signIn, type Role, type Viewer } from './people';

export { expect } from 'playwright/test';

type StoredState = Awaited<ReturnType<BrowserContext['storageState']>>;
type ContextOptions = Parameters<NonNullable<ReturnType<BrowserContext['browser']>>['newContext']>[0];

interface Fixtures {
  mailbox: Mailbox;
  /** A page of a person of the demo works, in a browser of their own. */
  login: (viewer: Viewer, options?: ContextOptions) => Promise<Page>;
  /** What a test makes go wrong inside a page on purpose. */
  expectedFaults: RegExp[];
  /** Collects what goes wrong inside a page; looked at when the test ends. */
  watch: (page: Page) => Page;
}

interface WorkerFixtures {
  /** The application's own database, to look at what became of it. */
  database: Db;
  /** One sign-in a role and worker. */
  sessions: Map<Role, StoredState>;
}

/**
 * Every page that a test opens by `login` is watched: an error on its console, an uncaught exception, an answer of
 * 500 or a breach of the content security policy fails the test.
 */
export const test = base.extend<Fixtures, WorkerFixtures>({
  database: [
    // Playwright reads a fixture's needs off its first parameter.
    // eslint-disable-next-line no-empty-pattern
    async ({}, use) => {
      const database = openDatabase(setting('DATABASE_URL'), 2);
      await use(database);
      await database.close();
    },
    { scope: 'worker' },
  ],
  sessions: [
    // eslint-disable-next-line no-empty-pattern
    async ({}, use) => {
      await use(new Map());
    },
    { scope: 'worker' },
  ],
  // eslint-disable-next-line no-empty-pattern
  mailbox: async ({}, use) => {
    await use(new Mailbox(setting('RIGWRIGHT_E2E_MAILBOX')));
  },
  // eslint-disable-next-line no-empty-pattern
  expectedFaults: async ({}, use) => {
    await use([]);
  },
  watch: async ({ expectedFaults }, use) => {
    const faults: string[] = [];
    const own = new URL(setting('RIGWRIGHT_E2E_URL')).origin;
    await use((page) => {
      page.on('console', (message) => {
        // The stand-ins have pages of their own. How a page itself answers is asked by its test.
        const isPage = message.location().url === page.url();
        if (message.type() !== 'error' || isPage || !page.url().startsWith(own)) return;
        faults.push(`${page.url()}: ${message.text()}`);
      });
      page.on('pageerror', (error) => faults.push(`${page.url()}: ${error.message}`));
      page.on('response', (response) => {
        if (response.status() >= 500) faults.push(`${response.url()}: ${response.status()}`);
      });
      return page;
    });
    const unexpected = faults.filter((fault) => !expectedFaults.some((one) => one.test(fault)));
    expect(unexpected, 'what went wrong inside the pages').toEqual([]);
  },
  login: async ({ browser, sessions, watch, contextOptions, baseURL }, use) => {
    const contexts: BrowserContext[] = [];
    await use(async (viewer, options = {}) => {
      let storageState = viewer === 'visitor' ? undefined : sessions.get(viewer);
      if (viewer !== 'visitor' && storageState === undefined) {
        const first = await browser.newContext({ ...contextOptions, baseURL });
        await signIn(await first.newPage(), viewer);
        storageState = await first.storageState();
        sessions.set(viewer, storageState);
        await first.close();
      }
      const context = await browser.newContext({ ...contextOptions, baseURL, storageState, ...options });
      contexts.push(context);
      return watch(await context.newPage());
    });
    await Promise.all(contexts.map((context) => context.close()));
  },
});

/** A setting that `npm test` gives to the tests in the browser. */
export function setting(name: string): string {
  const value = process.env[name];
  if (!value) throw new Error(`${name} is not set; run the tests by “npm test -- tests/e2e”.`);
  return value;
}
