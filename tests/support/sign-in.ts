import type { Page } from 'playwright-core';
import { DEMO_PASSWORD } from '#dev-idp/accounts';

/** Signs in through the provider's own page and waits until the browser is back at `path`. */
export async function signInAs(page: Page, url: string, { email, path = '/' }: { email: string; path?: string }): Promise<void> {
  await page.goto(`${url}/api/auth/sign-in?returnTo=${encodeURIComponent(path)}`);
  await page.getByLabel('E-mail address').fill(email);
  await page.getByLabel('Password').fill(DEMO_PASSWORD);
  await page.getByRole('button', { name: 'Sign in', exact: true }).click();
  await page.waitForURL(`${url}${path}`);
}
