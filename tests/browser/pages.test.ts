import { mkdirSync } from 'node:fs';
import { join } from 'node:path';
import { Client } from 'pg';
import type { Browser, BrowserContext, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { seedDemo } from '#backend/demo/seed-demo';
import { seriousFindings } from '../support/axe.js';
import { launchBrowser } from '../support/chromium.js';
import { createTestDatabase, type TestDatabase } from '../support/database.js';
import { signInAs } from '../support/sign-in.js';
import { issuerOf, stackPorts, startStack, type Stack } from '../support/stack.js';
import { watchPage } from '../support/watch-page.js';

const SCREENSHOTS = new URL('../../.screenshots/', import.meta.url).pathname;
const ADDRESS = { engineer: 'mara.oyelaran@harrowmere.example', manager: 'edda.quillfeather@harrowmere.example', administrator: 'tobin.aschero@harrowmere.example', vendor: 'ines.torvald@tarnbeck.example' } as const;
type Who = keyof typeof ADDRESS;

let database: TestDatabase;
let stack: Stack;
let browser: Browser;
let admin: Client;
const addresses: Record<string, string> = {};

/** The demo as npm start shows it, once its decodes have run. */
beforeAll(async () => {
  mkdirSync(SCREENSHOTS, { recursive: true });
  database = await createTestDatabase();
  const ports = await stackPorts();
  stack = await startStack(database, { ports });
  await seedDemo({ ownerUrl: database.ownerUrl, storageDir: stack.storageDir, issuer: issuerOf(ports) });
  admin = new Client({ connectionString: database.adminUrl });
  await admin.connect();
  browser = await launchBrowser();
  const waiting = async () => (await admin.query("select count(*)::integer as n from decodes where state in ('queued', 'running')")).rows[0].n as number;
  while (await waiting() > 0) await new Promise((resolve) => { setTimeout(resolve, 500); });
  const { rows } = await admin.query<{ number: string; title: string }>('select number, title from issues');
  for (const { number, title } of rows) addresses[title] = `/issues/SKH/${number}`;
  const { rows: links } = await admin.query<{ id: string }>("select id from links where name = 'Crane air'");
  addresses.link = `/links/${links[0].id}`;
}, 1_200_000);
afterAll(async () => {
  await browser?.close();
  await admin?.end();
  await stack?.stop();
  await database?.drop();
});

const BROKEN = 'No block found at all since the spring configuration';
const PAGES: readonly (readonly [name: string, who: Who, path: () => string, landmark: RegExp])[] = [
  ['day-sheet', 'engineer', () => '/', /Day sheet/], ['register', 'engineer', () => '/register?standing=any', /Register/],
  ['file-an-issue', 'engineer', () => '/issues/new', /File an issue/], ['issue', 'engineer', () => addresses[BROKEN], /No block found/],
  ['issue-as-vendor', 'vendor', () => addresses[BROKEN], /No block found/], ['issue-settled', 'engineer', () => addresses['Wrong identity after the cell was renamed'], /Wrong identity/],
  ['issue-clean', 'engineer', () => addresses['Same settings, still no random-access response'], /Same settings/],
  ['links', 'engineer', () => '/links', /Links/], ['link', 'engineer', () => addresses.link, /Crane air/], ['overview', 'manager', () => '/overview', /Overview/],
  ['programme', 'administrator', () => '/programme', /Skerry Harbour/], ['account', 'vendor', () => '/account', /Account|Ines Torvald/], ['missing', 'vendor', () => '/issues/SKH/none', /./],
];

/** What nobody has to sign in for: the way in, the provider's own page, and an invitation. */
const WAY_IN: readonly (readonly [name: string, path: string])[] = [
  ['sign-in', '/'], ['sign-in-at-provider', '/api/auth/sign-in?returnTo=%2F'], ['invitation', '/invitations/0000000000000000000000000000000000000000000'],
];

interface Look { theme: 'light' | 'dark'; width: number }
interface Opened { context: BrowserContext; page: Page; complaints: () => string[] }

async function openAs(who: Who, look: Look): Promise<Opened> {
  const opened = await open(look);
  await signInAs(opened.page, stack.url, { email: ADDRESS[who], path: '/account' });
  return opened;
}

async function open(look: Look): Promise<Opened> {
  const context = await browser.newContext({ viewport: { width: look.width, height: 900 }, colorScheme: look.theme, reducedMotion: 'reduce' });
  const page = await context.newPage();
  page.setDefaultTimeout(60_000);
  const { complaints } = watchPage(page, [stack.url, stack.issuer]);
  return { context, page, complaints };
}

/** Live streams stay open, so a page never falls silent on the network: it is settled when its text is. */
async function settled(page: Page, landmark: RegExp): Promise<void> {
  await page.getByRole('heading', { level: 1, name: landmark }).first().waitFor();
  let before = '';
  await expect.poll(async () => {
    const now = await page.locator('body').innerText();
    const same = now === before;
    before = now;
    return same;
  }, { timeout: 30_000, interval: 400 }).toBe(true);
  await page.evaluate(() => document.fonts.ready.then(() => true));
}

/** A picture to look at, no check. Where the browser draws in software it can hang over one: then it takes another. */
async function picture(page: Page, name: string): Promise<void> {
  const options = { path: join(SCREENSHOTS, `${name}.png`), fullPage: true, timeout: 30_000 };
  await page.screenshot(options).catch(() => page.screenshot(options));
}

/** Leaves a picture, and holds the page to accessibility and its width. */
async function looked(page: Page, { name, theme, width }: Look & { name: string }): Promise<void> {
  await picture(page, `${name}-${theme}-${width}`);
  expect(await seriousFindings(page), `${name}, ${theme}, ${width}`).toEqual([]);
  expect(await page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth), `${name} is wider than ${width}`).toBeLessThanOrEqual(0);
}

describe.each([['light', 1440], ['dark', 1440], ['light', 390], ['dark', 390], ['light', 1920]] as const)('every page, %s, %i wide', (theme, width) => {
  it.each(['engineer', 'vendor', 'manager', 'administrator'] as const)('as the %s: no serious finding, no violation, nothing wider than the screen', async (who) => {
    const { context, page, complaints } = await openAs(who, { theme, width });
    for (const [name, , path, landmark] of PAGES.filter((each) => each[1] === who)) {
      await page.goto(`${stack.url}${path()}`);
      await settled(page, landmark);
      await looked(page, { name, theme, width });
    }
    expect(complaints()).toEqual([]);
    await context.close();
  }, 300_000);

  it('before anyone has signed in: the same', async () => {
    const { context, page, complaints } = await open({ theme, width });
    for (const [name, path] of WAY_IN) {
      await page.goto(`${stack.url}${path}`);
      await settled(page, /./);
      await looked(page, { name, theme, width });
    }
    expect(complaints()).toEqual([]);
    await context.close();
  }, 120_000);
});

describe('the issue page', { timeout: 180_000 }, () => {
  it('shows the capture closing under the right settings and not under the wrong ones', async () => {
    const { context, page } = await openAs('engineer', { theme: 'light', width: 1440 });
    await page.goto(`${stack.url}${addresses[BROKEN]}`);
    await settled(page, /No block found/);
    const figure = async (under: RegExp) => {
      const text = await page.getByRole('figure', { name: under }).first().innerText();
      return { evm: Number(text.match(/EVM\s+([\d.]+)\s*%/)?.[1]), text };
    };
    const [a, b] = [await figure(/under A/i), await figure(/under B/i)];
    expect(a.text).toMatch(/closes/i);
    expect(b.text).toMatch(/do not gather/i);
    expect(b.evm).toBeGreaterThan(2 * a.evm);
    await context.close();
  });

  it('is used with the keyboard alone: from the register to an entry in the thread', async () => {
    const { context, page } = await openAs('engineer', { theme: 'light', width: 1440 });
    await page.goto(`${stack.url}/register`);
    await settled(page, /Register/);
    await page.keyboard.press('Tab');
    expect(await page.evaluate(() => document.activeElement?.textContent)).toMatch(/skip|main|content/i);
    for (let presses = 0; presses < 60; presses++) {
      await page.keyboard.press('Tab');
      if (await page.evaluate(() => /\/issues\/SKH\/\d{4}/.test((document.activeElement as HTMLElement | null)?.dataset.row ?? (document.activeElement as HTMLAnchorElement | null)?.href ?? ''))) break;
    }
    await page.keyboard.press('Enter');
    await page.waitForURL(/\/issues\/SKH\/\d{4}/);
    await page.getByLabel('Write an entry').waitFor();
    for (let presses = 0; presses < 120; presses++) {
      await page.keyboard.press('Tab');
      if (await page.evaluate(() => document.activeElement?.tagName === 'TEXTAREA')) break;
    }
    await page.keyboard.type('Written without a mouse.');
    await page.keyboard.press('Control+Enter');
    await page.getByText('Written without a mouse.').first().waitFor();
    await context.close();
  });
});
