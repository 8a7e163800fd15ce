import type { Browser, BrowserContext, Page } from 'playwright-core';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { makeProgramme } from '#backend/ops/programme';
import { DEMO_PASSWORD } from '#dev-idp/accounts';
import { launchBrowser } from '../support/chromium.js';
import { createTestDatabase, type TestDatabase } from '../support/database.js';
import { signInAs } from '../support/sign-in.js';
import { startStack, type Stack } from '../support/stack.js';
import { watchPage } from '../support/watch-page.js';

const TOBIN = 'tobin.aschero@harrowmere.example';
let database: TestDatabase;
let stack: Stack;
let browser: Browser;
let context: BrowserContext;
let page: Page;
let watched: ReturnType<typeof watchPage>;
let invitation: string;

beforeAll(async () => {
  database = await createTestDatabase();
  stack = await startStack(database);
  const programme = { code: 'SKH', name: 'Skerry Harbour private network', email: TOBIN, party: 'Harrowmere Integration Lab', issuer: stack.issuer, days: 1 };
  invitation = `${stack.url}/invitations/${await makeProgramme(database.ownerUrl, programme)}`;
  browser = await launchBrowser();
});
afterAll(async () => {
  await browser?.close();
  await stack?.stop();
  await database?.drop();
});
beforeEach(async () => {
  context = await browser.newContext();
  page = await context.newPage();
  watched = watchPage(page, [stack.url, stack.issuer]);
});
afterEach(async () => {
  await context.close();
  expect(watched.complaints()).toEqual([]);
});

async function fillIn(email: string): Promise<void> {
  await page.getByLabel('E-mail address').fill(email);
  await page.getByLabel('Password').fill(DEMO_PASSWORD);
  await page.getByRole('button', { name: 'Sign in', exact: true }).click();
}

describe('the way in', () => {
  it('leads an invited person from the link to the day sheet, and out again at both ends', async () => {
    await page.goto(invitation);
    await page.getByRole('link', { name: 'Accept and sign in' }).click();
    await fillIn(TOBIN);
    await page.waitForURL(`${stack.url}/`);
    await page.getByRole('heading', { level: 1 }).waitFor();
    expect(await page.evaluate(() => document.cookie)).toBe('');

    await page.goto(`${stack.url}/account`);
    await page.getByRole('button', { name: 'Sign out' }).click();
    await page.getByRole('link', { name: 'Sign in', exact: true }).click();
    await page.getByLabel('Password').waitFor();
    expect(new URL(page.url()).origin).toBe(stack.issuer);
  });

  it('asks nobody twice, and returns to the page that was wanted', async () => {
    await signInAs(page, stack.url, { email: TOBIN, path: '/links' });
    await page.goto(`${stack.url}/api/auth/sign-in?returnTo=/overview`);
    await page.waitForURL(`${stack.url}/overview`);
  });

  it('tells a stranger that access is by invitation, and lets them try as somebody else', async () => {
    await page.goto(`${stack.url}/`);
    await page.getByRole('link', { name: 'Sign in', exact: true }).click();
    await fillIn('sable.orrindale@outside.example');
    await page.waitForURL(/\/sign-in\?outcome=refused/);
    await page.getByRole('alert').waitFor();
    await page.getByRole('link', { name: /sign in/i }).click();
    await page.getByLabel('Password').waitFor();
    await fillIn(TOBIN);
    await page.waitForURL(`${stack.url}/`);
  });
});
