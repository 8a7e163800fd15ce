import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import type { Page } from 'playwright-core';

const source = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');

/** Serious and critical findings of axe-core (WCAG 2.2 A and AA) on the page as it stands. */
export async function seriousFindings(page: Page): Promise<string[]> {
  await page.evaluate(source);
  return page.evaluate(async () => {
    const { axe } = window as unknown as { axe: { run(context: Document, options: object): Promise<{ violations: { id: string; impact: string | null; help: string; nodes: { target: unknown; failureSummary?: string }[] }[] }> } };
    const { violations } = await axe.run(document, { runOnly: ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'] });
    return violations.filter(({ impact }) => impact === 'serious' || impact === 'critical')
      .map(({ id, help, nodes }) => `${id}: ${help}: ${nodes.slice(0, 3).map(({ target }) => JSON.stringify(target)).join(' ')}`);
  });
}
