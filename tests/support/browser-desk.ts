import type { Browser, BrowserContext, Page } from 'playwright-core';
import { z } from 'zod';
import type { Role } from '@/lib/fleet/rights';

/** A tablet beside the rigs, and a screen on a desk. */
export const AT_THE_RIG = { width: 1180, height: 820 };
export const AT_A_DESK = { width: 1440, height: 900 };

interface Account {
  email: string;
  password: string;
}

interface Place {
  url: string;
  size?: { width: number; height: number };
}

const csrfSchema = z.object({ csrfToken: z.string() });

/** The demo's account of a role. */
export function demoAccount(role: Role, { password }: { password: string }): Account {
  return { email: `${role}@ellwand-demo.example`, password };
}

/** A browser of its own for one person: nobody is signed in yet. */
export async function openDesk(browser: Browser, { url, size = AT_A_DESK }: Place): Promise<Page> {
  const context = await browser.newContext({ baseURL: url, viewport: size, locale: 'en-GB' });
  context.setDefaultTimeout(30_000);
  return context.newPage();
}

/** Signs in on the sign-in page, as a person does, and waits for the floor. */
export async function signInByPage(page: Page, account: Account): Promise<void> {
  await page.goto('/sign-in');
  await fillSignIn(page, account);
  await page.waitForURL((url) => url.pathname === '/');
}

/** Fills the sign-in page and sends it. */
export async function fillSignIn(page: Page, { email, password }: Account): Promise<void> {
  await page.getByLabel('E-mail').fill(email);
  await page.getByLabel('Password').fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
}

/** Gives the browser a session without the page, where signing in is not what is tested. */
async function signInByRequest({ request }: BrowserContext, account: Account): Promise<void> {
  const asked = await request.get('/api/auth/csrf');
  const { csrfToken } = csrfSchema.parse(await asked.json());
  const form = { csrfToken, json: 'true', ...account };
  const answer = await request.post('/api/auth/callback/credentials', { form });
  if (!answer.ok()) throw new Error(`${account.email} was not let in: ${answer.status()}`);
}

/** A browser of its own in which a person of the demo is signed in; its page is still empty. */
export async function openSignedIn(browser: Browser, place: Place, account: Account): Promise<Page> {
  const page = await openDesk(browser, place);
  await signInByRequest(page.context(), account);
  return page;
}
