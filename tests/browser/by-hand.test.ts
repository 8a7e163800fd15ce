import { readFile } from 'node:fs/promises';
import type { Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { plainConf, plainYaml } from '#backend/demo/story';
import type { Declared } from '#backend/generator/snapshots/declared';
import { writeSnapshot } from '#backend/generator/snapshots/snapshot';
import { DEMO_PASSWORD } from '#dev-idp/accounts';
import { openField, visit, type Field, type Visitors, type Who } from '../support/field.js';

/** A page that waits for a busy server. */
const PATIENT = { timeout: 20_000 };
const SABLE = 'sable.orrindale@outside.example';
let field: Field;
let visitors: Visitors;

beforeAll(async () => {
  field = await openField();
  visitors = await visit(field, { alsoAt: [field.stack.mailUrl] });
}, 180_000);
afterAll(async () => {
  await visitors?.leave();
  await field?.stop();
});

const openAs = (who: Who, path?: string): Promise<Page> => visitors.openAs(who, path);

/** Files an issue on the crane's link without a file, as the page itself calls the server; answers its address. */
async function plant(page: Page, title: string): Promise<string> {
  const body = {
    linkId: field.tenants.links.crane.id, title, severity: 'minor', lastRung: { downlink: null, uplink: null }, fileKey: crypto.randomUUID(),
    signalPath: { path: null, attenuationDb: null, levelDbm: null, clockSource: null, lateCounters: null },
  };
  const filed = await page.evaluate(async (sent) => {
    const response = await fetch('/api/issues', { method: 'POST', headers: { 'content-type': 'application/json', 'x-crosstie': '1' }, body: JSON.stringify(sent) });
    return response.json() as Promise<{ number: string }>;
  }, body);
  return `/issues/SKH/${filed.number}`;
}
async function go(page: Page, path: string): Promise<void> {
  await page.goto(`${field.stack.url}${path}`);
  await page.locator('.page h1').first().waitFor();
}

describe('what a role does not include', { timeout: 120_000 }, () => {
  it('is not offered: an observer files no issue, and is told so on the page itself', async () => {
    const osk = await openAs('osk', '/');
    await osk.getByRole('heading', { level: 1, name: 'Day sheet' }).waitFor();
    expect(await osk.getByRole('link', { name: 'File an issue' }).count()).toBe(0);
    await go(osk, '/issues/new');
    await osk.getByText('you are an observer').waitFor();
    expect(await osk.locator('input[type=file]').count()).toBe(0);
    const mara = await openAs('mara', '/');
    await mara.getByRole('link', { name: 'File an issue' }).waitFor();
  });

  it('leaves a manager the severity, and nothing else of what the issue says', async () => {
    const mara = await openAs('mara');
    const path = await plant(mara, 'Cell found one time in five');
    const edda = await openAs('edda', path);
    await edda.getByRole('button', { name: 'Change the severity' }).click();
    const form = edda.getByRole('form', { name: 'Change the severity' });
    await form.getByRole('radio', { name: 'critical' }).check();
    await form.getByRole('button', { name: 'Keep the severity' }).click();
    await expect.poll(() => edda.locator('.issue-number').textContent(), PATIENT).toContain('critical');
    expect(await edda.getByRole('button', { name: 'Correct the issue' }).count()).toBe(0);
    await edda.getByText(/changed the severity from "minor" to "critical"/).waitFor();
    await go(mara, path);
    expect(await mara.getByRole('button', { name: 'Change the severity' }).count()).toBe(0);
    await mara.getByRole('button', { name: 'Correct the issue' }).waitFor();
  });
});

/** Makes one move of the stage, with what its form asks for. */
async function move(page: Page, label: string, given: Record<string, string> = {}): Promise<void> {
  await page.getByRole('button', { name: label, exact: true }).click();
  const form = page.getByRole('form', { name: label, exact: true });
  for (const [field_, value] of Object.entries(given)) {
    const control = form.getByLabel(field_, { exact: true });
    if (await control.evaluate((element) => element.tagName === 'SELECT')) await control.selectOption({ label: value });
    else await control.fill(value);
  }
  await form.getByRole('button', { name: label, exact: true }).click();
  await form.waitFor({ state: 'detached' });
}

describe('the stage', { timeout: 180_000 }, () => {
  it('goes by an offered build to the retest, whose outcome says where it may go', async () => {
    const mara = await openAs('mara');
    const path = await plant(mara, 'Terminal rejects the cell');
    const rao = await openAs('rao', path);
    await move(rao, 'Take up');
    await move(rao, 'Agree the cause', { Reason: 'The list of identities is the old one.' });
    await move(rao, 'Offer a change', { 'Build that carries the change': 'V-Port 22.3.1 (side B)' });
    await expect.poll(() => rao.locator('.ends').textContent(), PATIENT).toContain('22.3.1');
    await go(mara, path);
    await move(mara, 'Start the retest');
    await mara.getByText('Settle: needs a clean retest on named builds').waitFor();

    await mara.getByRole('button', { name: 'Record a retest' }).click();
    const retest = mara.getByRole('form', { name: 'Record a retest' });
    await retest.getByRole('radio', { name: 'clean' }).check();
    await retest.getByLabel('Build of TR-8 (side A)').selectOption({ label: '4.2.1' });
    await retest.getByRole('button', { name: 'Record the retest' }).click();
    await retest.getByRole('alert').waitFor();
    expect(await retest.getByLabel(/Decode of the retest/).getAttribute('aria-invalid')).toBe('true');

    await retest.getByRole('radio', { name: 'failed' }).check();
    await retest.getByRole('button', { name: 'Record the retest' }).click();
    await retest.waitFor({ state: 'detached' });
    await mara.getByRole('button', { name: 'Back to change offered' }).click();
    await mara.getByText(/It rests on the failed retest of .* 4\.2\.1 with 22\.3\.1/).waitFor();
    await mara.getByRole('form', { name: 'Back to change offered' }).getByRole('button', { name: 'Back to change offered' }).click();
    // The failed retest belongs to the round that it ended: the next one begins without.
    await move(mara, 'Start the retest');
    await mara.getByText('Back to change offered: needs a failed retest').waitFor();
  });

  it('is waived by both signatures; the side that has not signed is told at the head of the page', async () => {
    const mara = await openAs('mara');
    const path = await plant(mara, 'Constellation turns by a step each symbol');
    const ines = await openAs('ines', path);
    await move(ines, 'Ask for a waiver', { Reason: 'The next load takes it.', 'Ends on': '2099-03-31' });
    await ines.getByText('Vimmery Devices has not signed yet.').first().waitFor();
    expect(await ines.getByRole('button', { name: 'Sign for my party' }).count()).toBe(0);
    const rao = await openAs('rao', path);
    await expect.poll(() => rao.locator('.next-move').textContent(), PATIENT).toMatch(/Vimmery Devices.*sign the waiver/);
    await rao.getByRole('link', { name: 'Read and sign it' }).click();
    await rao.getByRole('button', { name: 'Sign for my party' }).click();
    await rao.getByText('Waiver in force').waitFor();
    await ines.getByText('Waiver in force').waitFor();
    expect(await ines.getByText('Read it').count()).toBe(0);
  });
});

const said: Declared = {
  technology: 'nr', subcarrierSpacing: 30_000, cyclicPrefix: 'normal', carrierFrequency: 3_489_420_000, physicalCellId: 418, resourceBlocks: 38, channelBandwidth: 15e6, duplexMode: 'tdd', band: 78,
};
const upload = (name: string, text: string) => ({ name, mimeType: 'application/octet-stream', buffer: Buffer.from(text) });

describe('files put on an issue', { timeout: 180_000 }, () => {
  let mara: Page;

  it('dropped together, each take the side that their names speak of', async () => {
    mara = await openAs('mara');
    await go(mara, await plant(mara, 'Block found, nothing after it'));
    await mara.locator('.section', { has: mara.getByRole('heading', { name: 'Files' }) }).getByRole('button', { name: 'Add files' }).click();
    await mara.locator('.panel input[type=file]').setInputFiles([
      upload('tarnbeck-cell.yaml', writeSnapshot(said, plainYaml).text), upload('vimmery-terminal.conf', writeSnapshot({ ...said, cyclicPrefix: 'extended' }, plainConf).text),
    ]);
    const put = mara.getByRole('button', { name: 'Put 2 on the issue' });
    await expect.poll(() => put.isEnabled(), { timeout: 30_000 }).toBe(true);
    const sides = await mara.locator('.panel').getByLabel(/^of/).evaluateAll((all) => all.map((select) => (select as HTMLSelectElement).value));
    expect(sides).toEqual(['a', 'b']);
    await put.click();
    await mara.locator('.file-list').getByText('vimmery-terminal.conf').first().waitFor();
  });

  it('are decoded, and on paper the tie sheet is whole', async () => {
    await mara.getByRole('button', { name: 'Decode', exact: true }).click();
    const form = mara.getByRole('form', { name: 'Decode again' });
    expect(await form.getByLabel('Snapshot of side A').locator('option').allTextContents()).not.toContain('vimmery-terminal.conf (side B)');
    await form.getByRole('button', { name: 'Decode', exact: true }).click();
    await mara.getByRole('table', { name: /Tie sheet/ }).waitFor({ timeout: 60_000 });
    const rows = mara.locator('.ties tbody tr');
    const shown = () => rows.evaluateAll((all) => all.filter((row) => row.getClientRects().length > 0).length);
    expect(await shown()).toBeLessThan(await rows.count());
    await mara.emulateMedia({ media: 'print' });
    expect(await shown()).toBe(await rows.count());
    expect(await mara.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth)).toBeLessThanOrEqual(0);
    await mara.emulateMedia({ media: 'screen' });
  });

  it('under way are cancelled, and sent again', async () => {
    const page = await openAs('mara', '/issues/new');
    const session = await page.context().newCDPSession(page);
    const throttle = (uploadThroughput: number) => session.send('Network.emulateNetworkConditions', { offline: false, latency: 0, downloadThroughput: -1, uploadThroughput });
    await session.send('Network.enable');
    await throttle(400_000);
    await page.locator('input[type=file]').first().setInputFiles([{ name: 'site-photographs.zip', mimeType: 'application/zip', buffer: Buffer.alloc(4_000_000) }]);
    await page.getByText(/of 4 MB · sending/).waitFor();
    await page.getByRole('button', { name: 'Cancel site-photographs.zip' }).click();
    await page.getByText('4 MB · cancelled').waitFor();
    await throttle(-1);
    await page.getByRole('button', { name: 'Send again site-photographs.zip' }).click();
    await page.getByText('4 MB · read').waitFor();
  });
});

describe('with the keyboard alone', { timeout: 120_000 }, () => {
  it('a form that opens takes the focus, and gives it back to where it was opened from', async () => {
    const mara = await openAs('mara');
    const path = await plant(mara, 'Cell found one time in five, always 100 kHz off');
    await go(mara, path);
    const focused = () => mara.evaluate(() => document.activeElement?.textContent ?? '');
    const opener = mara.getByRole('button', { name: /the next move$/ });
    await opener.focus();
    await mara.keyboard.press('Enter');
    await expect.poll(() => mara.evaluate(() => document.activeElement?.tagName), PATIENT).toBe('SELECT');
    await mara.getByRole('button', { name: 'Leave as it is' }).focus();
    await mara.keyboard.press('Enter');
    await expect.poll(focused, PATIENT).toMatch(/the next move$/);
    await mara.getByRole('button', { name: 'Take up' }).focus();
    await mara.keyboard.press('Enter');
    await expect.poll(() => mara.evaluate(() => document.activeElement?.tagName), PATIENT).toBe('TEXTAREA');
    await mara.keyboard.type('Seen on our bench too.');
    await mara.getByRole('form', { name: 'Take up' }).getByRole('button', { name: 'Take up' }).focus();
    await mara.keyboard.press('Enter');
    await expect.poll(focused, { timeout: 20_000 }).toBe('Agree the cause');
  });
});

describe('a part of the issue that cannot be read', { timeout: 120_000 }, () => {
  it('says so in its own place, and is there after another try', async () => {
    const mara = await openAs('mara');
    const path = await plant(mara, 'No carrier after the mast was rewired');
    let broken = true;
    await mara.route(/\/(entries|history)$/, (route) => (broken ? route.fulfill({ status: 500, contentType: 'text/plain', body: 'down' }) : route.continue()));
    await go(mara, path);
    await mara.getByText('The thread could not be read.').waitFor();
    await mara.getByText('The history could not be read.').waitFor();
    broken = false;
    await mara.getByRole('alert').filter({ hasText: 'The thread' }).getByRole('button', { name: 'Try again' }).click();
    await mara.getByLabel('Write an entry').waitFor();
    await mara.getByText('The history could not be read.').waitFor();
  });
});

describe('an invitation', { timeout: 120_000 }, () => {
  it('is a letter, whose link lets in whom it was written to', async () => {
    const tobin = await openAs('tobin', '/programme');
    await tobin.getByRole('button', { name: /Invite/ }).first().click();
    const form = tobin.getByRole('form', { name: 'Invite a person' });
    await form.getByLabel('Address').fill(SABLE);
    await form.getByLabel('Party').selectOption({ label: 'Tarnbeck Radio' });
    await form.getByRole('button', { name: 'Invite', exact: true }).click();
    await tobin.getByText(`${SABLE} is invited.`).waitFor();

    const sable = await visitors.newPage();
    await expect.poll(async () => {
      await sable.goto(field.stack.mailUrl);
      return sable.getByRole('link', { name: /Invitation to/ }).count();
    }, { timeout: 20_000, interval: 500 }).toBe(1);
    await sable.getByRole('link', { name: /Invitation to/ }).click();
    await sable.getByRole('link', { name: /\/invitations\// }).click();
    await sable.getByRole('link', { name: 'Accept and sign in' }).click();
    await sable.getByLabel('E-mail address').fill(SABLE);
    await sable.getByLabel('Password').fill(DEMO_PASSWORD);
    await sable.getByRole('button', { name: 'Sign in', exact: true }).click();
    await sable.getByRole('heading', { level: 1, name: 'Day sheet' }).waitFor();
    await sable.getByText('Waiting for Tarnbeck Radio').waitFor();
    await tobin.reload();
    await tobin.locator('.section', { has: tobin.getByRole('heading', { name: 'People' }) }).getByRole('cell', { name: SABLE }).waitFor();
  });
});

describe('the register', { timeout: 120_000 }, () => {
  it('keeps a view with all that its address says, and exports no formula', async () => {
    const mara = await openAs('mara');
    await plant(mara, '=HYPERLINK("https://elsewhere.example","open")');
    await go(mara, '/register?severities=minor&sort=raised&order=desc');
    await mara.getByRole('button', { name: 'Keep this view' }).click();
    await mara.getByLabel('Keep this view as').fill('Minor, newest first');
    await mara.getByRole('button', { name: 'Keep', exact: true }).click();
    await go(mara, '/register');
    await mara.getByRole('link', { name: 'Minor, newest first' }).click();
    await expect.poll(() => new URL(mara.url()).searchParams.toString(), PATIENT).toBe('severities=minor&sort=raised&order=desc');
    const [download] = await Promise.all([mara.waitForEvent('download'), mara.getByRole('link', { name: 'Export CSV' }).click()]);
    const csv = await readFile(await download.path(), 'utf8');
    expect(csv).toContain(`"'=HYPERLINK(`);
    expect(csv).not.toMatch(/(^|[,"])=HYPERLINK/m);
  });
});

describe('what was used by hand', () => {
  it('kept to its own content security policy, without uncaught errors', () => {
    expect(visitors.complaints()).toEqual([]);
  });
});
