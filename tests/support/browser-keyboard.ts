import type { Page } from 'playwright-core';

type Role = Parameters<Page['getByRole']>[0];

/** More stops than any page has. */
const STOPS_MOST = 150;

/** Presses Tab until the focus is on the control. @throws Error when it cannot be reached that way */
export async function tabTo(
  page: Page,
  { role, name }: { role: Role; name: string | RegExp },
): Promise<void> {
  const control = page.getByRole(role, { name, exact: typeof name === 'string' }).first();
  await control.waitFor();
  for (let stop = 0; stop < STOPS_MOST; stop += 1) {
    if (await control.evaluate((element) => element === document.activeElement)) return;
    await page.keyboard.press('Tab');
  }
  throw new Error(`Tab does not reach the ${role} ${String(name)}`);
}
