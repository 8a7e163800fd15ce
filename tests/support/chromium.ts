import { existsSync } from 'node:fs';
import { chromium, type Browser } from 'playwright-core';

/** Debian's Chromium; npm test installs it where it is missing. */
function executable(): string {
  const found = ['/usr/bin/chromium', '/usr/bin/chromium-browser'].find((path) => existsSync(path));
  if (!found) throw new Error('Chromium is not installed. Run once: sudo apt-get install chromium');
  return found;
}

/** Chromium's sandbox refuses root; nothing but the tests' own pages is ever opened. */
const args = [
  ...(process.getuid?.() === 0 ? ['--no-sandbox'] : []),
  '--disable-gpu', '--disable-dev-shm-usage', '--disable-background-networking', '--disable-component-update',
  '--disable-default-apps', '--disable-sync', '--no-first-run', '--font-render-hinting=none', '--hide-scrollbars',
];

export function launchBrowser(): Promise<Browser> {
  return chromium.launch({ executablePath: executable(), args });
}
