/** Waits until a part answers over HTTP. */
import { setTimeout as delay } from 'node:timers/promises';
import { lastLines, PlainError } from './say.mjs';

async function answers(url) {
  try {
    return (await fetch(url, { signal: AbortSignal.timeout(3000), redirect: 'manual' })).status === 200;
  } catch {
    return false;
  }
}

/** Resolves when `url` answers 200; gives up when the launcher stops, and with the part's last lines after `seconds`. */
export async function waitFor(url, { part, launcher, seconds = 60 }) {
  const end = Date.now() + seconds * 1000;
  while (!(await answers(url))) {
    if (launcher.stopping) throw new PlainError('stopping');
    if (Date.now() > end) throw new PlainError(`The ${part.name} does not answer at ${url} after ${seconds} s. Its log, ${part.logFile}, ends:\n${lastLines(part)}`);
    await delay(100);
  }
}
