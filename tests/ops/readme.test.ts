import { readFileSync } from 'node:fs';
import { expect, it } from 'vitest';
import { VARIABLES } from '#backend/config';
import { ACCOUNTS, DEMO_PASSWORD } from '#dev-idp/accounts';

const read = (path: string) => readFileSync(new URL(`../../${path}`, import.meta.url), 'utf8');
const readme = read('README.md');
const tables = readme.split('\n').filter((line) => line.startsWith('|'));

it('the README has every variable that server and worker read in its table', () => {
  expect(VARIABLES.length).toBeGreaterThan(20);
  expect(VARIABLES.filter((name) => !tables.some((line) => line.startsWith(`| \`${name}\` |`)))).toEqual([]);
});

it('the README has every variable that the launcher reads in its table', () => {
  const launcher = read('backend/bin/launch/settle.mjs') + read('dev-idp/settings.ts');
  const names = [...launcher.matchAll(/\b(?:[A-Z]+_)+(?:URL|PORT|DIR|PASSWORD|SECRET)\b/g)].map(([name]) => name);
  const internal = ['IDP_STORE_DIR', 'DEFAULT_PORT'];
  expect(names.length).toBeGreaterThan(10);
  expect([...new Set(names)].filter((name) => !internal.includes(name) && !tables.some((line) => line.includes(`\`${name}\``)))).toEqual([]);
});

it('the README lists the demo accounts as they are', () => {
  for (const { email, name } of ACCOUNTS) expect(tables.filter((line) => line.includes(email) && line.includes(name))).toHaveLength(1);
  expect(readme).toContain(`\`${DEMO_PASSWORD}\``);
});
