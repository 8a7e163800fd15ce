import { Client } from 'pg';
import { PARTIES } from '#backend/demo/parties';
import { Rows } from '#backend/demo/rows';
import { plantTenants, type Tenants } from '#backend/demo/tenants';
import type { Page } from 'playwright-core';
import { createTestDatabase, type TestDatabase } from './database.js';
import { issuerOf, stackPorts, startStack, type Stack } from './stack.js';
import { signInAs } from './sign-in.js';

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

export const partyName = (key: keyof typeof PARTIES): string => PARTIES[key].name;
