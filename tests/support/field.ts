import { Client } from 'pg';
import { PARTIES } from '#backend/demo/parties';
import { Rows } from '#backend/demo/rows';
import { plantTenants, type Tenants } from '#backend/demo/tenants';
import type { Page } from 'playwright-core';
import { launchBrowser } from './chromium.js';
import { createTestDatabase, type TestDatabase } from './database.js';
import { issuerOf, stackPorts, startStack, type Stack } from './stack.js';
import { signInAs } from './sign-in.js';
import { watchPage } from './watch-page.js';

/** The whole product with the demo's people, units and links and not one issue: a cold start. */
export interface Field { readonly database: TestDatabase; readonly stack: Stack; readonly tenants: Tenants; stop(): Promise<void> }

export async function openField(): Promise<Field> {
  const database = await createTestDatabase();
  const ports = await stackPorts();
  const owner = new Client({ connectionString: database.ownerUrl });
  await owner.connect();
  const tenants = await plantTenants(new Rows(owner, new Date()), issuerOf(ports));
  await owner.end();
  const stack = await startStack(database, { ports });
  return {
    database, stack, tenants,
    async stop() {
      await stack.stop();
      await database.drop();
    },
  };
}

const ADDRESS = { mara: 'mara.oyelaran@harrowmere.example', edda: 'edda.quillfeather@harrowmere.example', tobin: 'tobin.aschero@harrowmere.example', osk: 'osk.brandreth@harrowmere.example', ines: 'ines.torvald@tarnbeck.example', jory: 'jory.haldane@ostrel.example', rao: 'rao.lindqvist@vimmery.example', petra: 'petra.wynnlow@pellfold.example' } as const;
export type Who = keyof typeof ADDRESS;
export const addressOf = (who: Who): string => ADDRESS[who];

export function enter(page: Page, field: Field, { who, path = '/' }: { who: Who; path?: string }): Promise<void> {
  return signInAs(page, field.stack.url, { email: ADDRESS[who], path });
}

/** People at a field, each in a browser context of their own, watched for policy violations to the end. */
export interface Visitors {
  newPage(): Promise<Page>;
  openAs(who: Who, path?: string): Promise<Page>;
  /** What the watched pages have complained of so far. */
  complaints(): string[];
  leave(): Promise<void>;
}

/** `alsoAt`: origins beside the application and its identity provider that pages may go to. */
export async function visit(field: Field, { alsoAt = [] }: { alsoAt?: readonly string[] } = {}): Promise<Visitors> {
  const browser = await launchBrowser();
  const complaints: (() => string[])[] = [];
  const newPage = async (): Promise<Page> => {
    const context = await browser.newContext({ viewport: { width: 1440, height: 900 }, acceptDownloads: true });
    const page = await context.newPage();
    page.setDefaultTimeout(60_000);
    complaints.push(watchPage(page, [field.stack.url, field.stack.issuer, ...alsoAt]).complaints);
    return page;
  };
  return {
    newPage,
    async openAs(who, path = '/account') {
      const page = await newPage();
      await enter(page, field, { who, path });
      return page;
    },
    complaints: () => complaints.flatMap((each) => each()),
    leave: () => browser.close(),
  };
}

export const partyName = (key: keyof typeof PARTIES): string => PARTIES[key].name;
