import { setTimeout as delay } from 'node:timers/promises';

/** Asks again until the answer is true; works in hooks too, where expect.poll does not. */
export async function until(what: string, ask: () => Promise<boolean>, { timeoutMs = 120_000, everyMs = 100 } = {}): Promise<void> {
  const end = Date.now() + timeoutMs;
  while (!await ask()) {
    if (Date.now() > end) throw new Error(`waited ${timeoutMs} ms in vain until ${what}`);
    await delay(everyMs);
  }
}
