import type { Page } from 'playwright-core';

/**
 * Collects what must never happen on a page: content-security violations, uncaught errors, requests to
 * other hosts. `complaints()` is to be empty at the end of a test.
 */
export function watchPage(page: Page, allowedOrigins: readonly string[]): { complaints(): string[] } {
  const found: string[] = [];
  page.on('pageerror', (error) => found.push(`uncaught: ${error.message}`));
  page.on('console', (message) => {
    if (/content security policy/i.test(message.text())) found.push(`policy: ${message.text()}`);
  });
  page.on('request', (request) => {
    const { origin, protocol } = new URL(request.url());
    if (/^(https?|wss?):$/.test(protocol) && !allowedOrigins.includes(origin)) found.push(`elsewhere: ${request.url()}`);
  });
  return { complaints: () => found };
}
