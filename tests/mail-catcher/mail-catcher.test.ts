import { mkdtempSync, rmSync } from 'node:fs';
import type { Server } from 'node:http';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createTransport } from 'nodemailer';
import type { SMTPServer } from 'smtp-server';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createMailPage, createSmtpCatcher } from '#backend/mail-catcher/catcher';
import { KeptMail, type KeptMessage } from '#backend/mail-catcher/kept-mail';
import { close, freePort, listen } from '../support/listen.js';

let folder: string;
let page: Server;
let smtp: SMTPServer;
let url: string;
let send: (message: { to: string; subject: string; text: string }) => Promise<unknown>;

beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'crosstie-mail-'));
  const kept = new KeptMail(folder, 3);
  const [pagePort, smtpPort] = [await freePort(), await freePort()];
  page = await listen(createMailPage(kept), pagePort);
  smtp = createSmtpCatcher(kept);
  await new Promise<void>((resolve) => { smtp.listen(smtpPort, '127.0.0.1', resolve); });
  url = `http://127.0.0.1:${pagePort}`;
  const transport = createTransport({ host: '127.0.0.1', port: smtpPort });
  send = (message) => transport.sendMail({ from: 'Crosstie <crosstie@localhost>', ...message });
});
afterAll(async () => {
  await new Promise<void>((resolve) => { smtp.close(() => resolve()); });
  await close(page);
  rmSync(folder, { recursive: true });
});

async function messages(): Promise<KeptMessage[]> {
  return ((await (await fetch(`${url}/messages.json`)).json()) as { items: KeptMessage[] }).items;
}

describe('the mail catcher', () => {
  it('keeps what nodemailer sends, letters outside ASCII included', async () => {
    await send({ to: 'ines.torvald@tarnbeck.example', subject: 'SKH/4187: your move — čtvrtek', text: 'Open http://127.0.0.1:4180/issues/SKH/4187 today.' });
    const [message] = await messages();
    expect(message).toMatchObject({ to: 'ines.torvald@tarnbeck.example', subject: 'SKH/4187: your move — čtvrtek' });
    const shown = await (await fetch(`${url}/messages/${message.id}`)).text();
    expect(shown).toContain('<a href="http://127.0.0.1:4180/issues/SKH/4187"');
  });

  it('shows markup in a message as text', async () => {
    await send({ to: 'a@b.example', subject: '<img src=x onerror=alert(1)>', text: '<script>alert(1)</script> http://x.example/"><b>' });
    const [{ id }] = await messages();
    for (const path of ['/', `/messages/${id}`]) {
      const reply = await fetch(`${url}${path}`);
      const text = await reply.text();
      expect(text).not.toMatch(/<img|<script>|<b>/);
      expect(reply.headers.get('content-security-policy')).toContain("default-src 'none'");
    }
  });

  it('forgets the oldest beyond its limit', async () => {
    for (let n = 0; n < 4; n++) await send({ to: 'a@b.example', subject: `number ${n}`, text: '.' });
    expect((await messages()).map(({ subject }) => subject).sort()).toEqual(['number 1', 'number 2', 'number 3']);
  });

  it.each(['..%2F..%2Fetc%2Fpasswd', 'nothing', '0000000000000-00000000'])('answers 404 for %s', async (id) => {
    expect((await fetch(`${url}/messages/${id}`)).status).toBe(404);
  });
});
