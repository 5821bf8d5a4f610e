import { existsSync } from 'node:fs';
import { type Browser, chromium } from 'playwright-core';

const path = '/usr/bin/chromium';

/** Whether the browser tests can run here; says so loudly when not. */
export const hasBrowser = existsSync(path);
if (!hasBrowser) process.stderr.write(`SKIPPED: ${path} is not installed; the page was not tried in a real browser\n`);

export function openBrowser(): Promise<Browser> {
  const quiet = ['quic', 'background-networking', 'component-update', 'sync'].map((part) => `--disable-${part}`);
  return chromium.launch({
    executablePath: path,
    args: ['--headless', '--no-sandbox', '--disable-gpu', '--no-first-run', ...quiet],
  });
}
