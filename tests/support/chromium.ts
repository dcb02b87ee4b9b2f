import { chromium, type Browser } from 'playwright-core';
import { findCommand } from '@/scripts/house/task.mjs';

/** Debian's Chromium without a window. Close it in `afterAll`. */
export function openBrowser(): Promise<Browser> {
  return chromium.launch({
    executablePath: findCommand('chromium') ?? 'chromium',
    // Its sandbox cannot work as root nor in most containers; it only ever sees pages of our own.
    args: ['--no-sandbox', '--disable-dev-shm-usage', '--force-color-profile=srgb'],
  });
}
