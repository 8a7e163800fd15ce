/** What stands on the screen when Crosstie is ready. */
import { join, relative } from 'node:path';
import { CLONE, LOGS } from './paths.mjs';
import { say } from './say.mjs';

async function sayAccounts() {
  const { ACCOUNTS, DEMO_PASSWORD } = await import(join(CLONE, 'dist/dev-idp/accounts.js'));
  const width = Math.max(...ACCOUNTS.map(({ email }) => email.length));
  say(`\nDemo accounts, all with the password ${process.env.IDP_PASSWORD || DEMO_PASSWORD}`);
  for (const { email, name, party, work } of ACCOUNTS) say(`  ${email.padEnd(width)}  ${name}, ${party}: ${work}`);
}

export async function greet({ publicUrl, local, ports }) {
  say(`\nCrosstie is ready at ${publicUrl}`);
  if (local.provider) await sayAccounts();
  if (local.mail) say(`\nMail that it sends: http://127.0.0.1:${ports.mailPage}`);
  say(`Logs: ${relative(process.cwd(), LOGS) || '.'}`);
  say(`Stop it with Ctrl-C, or: kill ${process.pid}`);
}
