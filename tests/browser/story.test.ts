import type { Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { crane, craneRadio } from '#backend/demo/signals';
import { plainConf, plainYaml } from '#backend/demo/story';
import { captureFiles, type CaptureSpec } from '#backend/generator/scenarios/capture';
import type { Declared } from '#backend/generator/snapshots/declared';
import { writeSnapshot } from '#backend/generator/snapshots/snapshot';
import { addressOf, openField, partyName, visit, type Field, type Visitors, type Who } from '../support/field.js';

let field: Field;
let visitors: Visitors;

beforeAll(async () => {
  field = await openField();
  visitors = await visit(field);
}, 180_000);
afterAll(async () => {
  await visitors?.leave();
  await field?.stop();
});

const openAs = (who: Who, path: string): Promise<Page> => visitors.openAs(who, path);

interface Upload { name: string; mimeType: string; buffer: Buffer }
const upload = (name: string, bytes: Uint8Array | string): Upload => ({ name, mimeType: 'application/octet-stream', buffer: Buffer.from(bytes) });

const radio = craneRadio({ seed: 501 });
const said: Declared = { technology: 'nr', subcarrierSpacing: 30_000, cyclicPrefix: 'normal', carrierFrequency: radio.declared.carrierFrequency, physicalCellId: radio.declared.physicalCellId };
const sides = (): Upload[] => [
  upload('tarnbeck-cell.yaml', writeSnapshot(said, plainYaml).text),
  upload('vimmery-terminal.conf', writeSnapshot({ ...said, subcarrierSpacing: 15_000 }, plainConf).text),
];
function capture(format: CaptureSpec['recording']['format'], seed: number): Upload[] {
  return captureFiles(crane(craneRadio({ seed }).spec, { format })).files.map(({ name, bytes }) => upload(name, bytes));
}

async function drop(page: Page, files: Upload[]): Promise<void> {
  await page.locator('input[type=file]').first().setInputFiles(files);
}

/** Fills in what no file says and files; answers the address of the issue. */
async function file(page: Page, title: string): Promise<string> {
  await page.getByLabel('In a sentence').fill(title);
  await page.getByRole('radio', { name: 'critical' }).check();
  await page.getByLabel('Who transmits in the capture').selectOption('a');
  await page.getByRole('button', { name: 'File the issue' }).click();
  await page.waitForURL(/\/issues\/SKH\/\d{4}$/);
  return new URL(page.url()).pathname;
}

describe('the whole story, from a cold database', { timeout: 240_000 }, () => {
  let path = '';
  let mara: Page;

  it('an integration engineer drops a capture and two snapshots, and sees what was read and what is missing', async () => {
    mara = await openAs('mara', '/issues/new');
    await drop(mara, [...sides(), ...capture('archive', 501)]);
    await mara.getByText('capture.sigmf', { exact: true }).first().waitFor();
    await mara.getByText(/15\.36 Msps/).first().waitFor();
    await mara.getByText(/Responders will ask for/).waitFor();
    // The link is read from the capture's own centre frequency; nobody types it.
    await expect.poll(() => mara.getByLabel('Link', { exact: false }).first().locator('option:checked').textContent()).toContain('Crane air');
    await mara.getByText(/only into a cabled, attenuated or shielded/).first().waitFor();
  });

  it('files it, watches the decode run, and reads the hint with its evidence', async () => {
    path = await file(mara, 'No block found since the spring configuration');
    await mara.getByText(/subcarrier spacing/i).first().waitFor();
    const hint = mara.getByRole('article').first();
    await hint.waitFor({ timeout: 120_000 });
    await expect.poll(() => hint.textContent()).toMatch(/side B/i);
    expect(await hint.textContent()).toMatch(/15 kHz/);
    expect(await hint.textContent()).toMatch(/30 kHz/);
    expect(await hint.textContent()).toMatch(/Would disprove it/);
    await mara.getByRole('figure').first().waitFor();
  });

  it('the vendor at odds gets the e-mail, answers in the thread and moves the stage', async () => {
    const letters = async () => ((await (await fetch(`${field.stack.mailUrl}/messages.json`)).json()) as { items: { to: unknown; text: string; subject: string }[] }).items;
    await expect.poll(async () => (await letters()).filter((letter) => JSON.stringify(letter.to).includes(addressOf('rao'))).length, { timeout: 30_000 }).toBeGreaterThan(0);
    const letter = (await letters()).find((each) => JSON.stringify(each.to).includes(addressOf('rao')));
    expect(letter?.text).toContain(path);
    expect((await letters()).some((each) => JSON.stringify(each.to).includes('pellfold'))).toBe(false);

    const rao = await openAs('rao', path);
    await rao.getByRole('article').first().waitFor();
    // The other side's file and its key paths are not for this reader.
    expect(await rao.locator('main').textContent()).not.toContain('tarnbeck-cell.yaml');
    await rao.getByLabel('Write an entry').fill('Our file is the one of the 15 kHz trial. **Checking** what runs.');
    await rao.getByRole('button', { name: 'Write', exact: true }).click();
    await rao.locator('strong', { hasText: 'Checking' }).waitFor();
    await rao.getByRole('button', { name: 'Take up' }).click();
    await rao.getByRole('form', { name: 'Take up' }).getByRole('button', { name: 'Take up' }).click();
    await rao.getByText('Taken up').first().waitFor();
  });

  it('reaches the open page of the first without a reload', async () => {
    await mara.getByText('Checking').first().waitFor({ timeout: 30_000 });
    await mara.getByText(/moved it to Taken up/).first().waitFor({ timeout: 30_000 });
  });

  it('does not exist for another vendor of the same programme', async () => {
    const petra = await openAs('petra', '/register');
    await petra.getByRole('heading', { level: 1 }).waitFor();
    expect(await petra.locator('main').textContent()).not.toContain('No block found');
    await petra.goto(`${field.stack.url}${path}`);
    await petra.getByRole('heading', { level: 1, name: 'Nothing here that you can open' }).waitFor();
    const hidden = await petra.locator('main').textContent();
    await petra.goto(`${field.stack.url}/issues/SKH/${path.endsWith('0000') ? '0001' : '0000'}`);
    await expect.poll(() => petra.locator('main').textContent()).toBe(hidden);
  });

  it('shows the programme manager what is open and whose move it is', async () => {
    const edda = await openAs('edda', '/overview');
    await edda.getByText(partyName('tarnbeck')).first().waitFor();
    await edda.goto(`${field.stack.url}/register`);
    await edda.getByText('No block found since the spring configuration').waitFor();
    const row = edda.getByRole('row', { name: /No block found/ });
    expect(await row.textContent()).toMatch(/Tarnbeck|Vimmery/);
  });
});

describe('a capture of each kind', { timeout: 240_000 }, () => {
  it.each([['sigmf', 'a SigMF pair'], ['wav', 'a WAV file'], ['raw', 'raw I/Q']] as const)('%s is read, filed and decoded: %s', async (format, words) => {
    const page = await openAs('mara', '/issues/new');
    await drop(page, [...sides(), ...capture(format, 600)]);
    if (format === 'raw') {
      await page.getByLabel('Sample format').selectOption('ci16_le');
      await page.getByLabel('Sample rate, Msps').fill('15.36');
    }
    if (format !== 'sigmf') {
      await page.getByLabel('Centre, MHz').fill('3489.42');
      await page.getByRole('button', { name: format === 'raw' ? 'Send' : 'Read again with this', exact: true }).click();
    }
    await expect.poll(() => page.getByLabel('Link', { exact: false }).first().locator('option:checked').textContent(), { timeout: 60_000 }).toContain('Crane air');
    await page.getByText(/15\.36 Msps/).first().waitFor();
    await file(page, `Read from ${words}`);
    const hint = page.getByRole('article').first();
    await hint.waitFor({ timeout: 120_000 });
    expect(await hint.textContent()).toMatch(/15 kHz/);
  });
});

describe('every page of the story', () => {
  it('kept to its own content security policy, without uncaught errors', () => {
    expect(visitors.complaints()).toEqual([]);
  });
});
