import type { Locator, Page } from 'playwright-core';

const CODE = /CODE (\d{4})/;

/** What the count on a rig's page showed, in order, since it was watched; lost with a reload. */
type Watched = Window & { countsSeen?: number[] };

/** An operator at the page of one rig. */
export class AtRig {
  private constructor(
    readonly page: Page,
    readonly name: string,
  ) {}

  /** Goes to the rig from the floor. */
  static async open(page: Page, name: string): Promise<AtRig> {
    await page.goto('/');
    await page.getByRole('list', { name: 'Rigs' }).getByRole('link', { name, exact: true }).click();
    await page.getByRole('heading', { level: 1, name }).waitFor();
    return new AtRig(page, name);
  }

  button(name: string | RegExp): Locator {
    return this.page.getByRole('button', { name });
  }

  /** What was refused last, in words. */
  refusal(): Locator {
    return this.page.getByRole('alert');
  }

  /** Waits until the rig is in this state, as the page says. */
  async isNow(state: string): Promise<void> {
    await this.page.locator(`[data-rig-state="${state}"]`).waitFor();
  }

  /** Confirms the notes, the full text too where the page asks for it. */
  async confirmNotes(): Promise<void> {
    const confirm = this.button('I have checked every point at the rig');
    await confirm.waitFor();
    const full = this.page.getByLabel(/^I have read the full notes/);
    if (await full.isVisible()) await full.check();
    await confirm.click();
    await this.page.getByText('You have confirmed these notes for this run.').waitFor();
  }

  /** What the virtual rig's display reads, once it shows a code other than `before`. */
  async codeOnDisplay(before?: string): Promise<string> {
    const display = this.page.getByText(/its display reads/);
    const shown = display.filter({ hasText: CODE, ...(before ? { hasNotText: before } : {}) });
    const code = CODE.exec((await shown.textContent()) ?? '')?.[1];
    if (code === undefined) throw new Error(`${this.name} shows no code`);
    return code;
  }

  /** Has a code shown and reads it off the display. */
  async readCode(): Promise<string> {
    const display = this.page.getByText(/its display reads/);
    const before =
      (await display.count()) > 0 ? CODE.exec((await display.textContent()) ?? '')?.[0] : undefined;
    await this.button('Show a code').click();
    return this.codeOnDisplay(before);
  }

  /** Types on one of the page's keypads. */
  async type(keypad: string, text: string): Promise<void> {
    const keys = this.page.getByRole('group', { name: keypad, exact: true });
    for (const key of text) {
      await keys.getByRole('button', { name: key === '.' ? 'decimal point' : key, exact: true }).click();
    }
  }

  /** Proves presence with the code where a display is fitted, then presses the button after which something moves. */
  async start(): Promise<void> {
    await this.provePresence();
    await this.button(/^Trim and/).click();
  }

  /** As `start`, after a pause or a hold. */
  async goOn(): Promise<void> {
    await this.provePresence();
    await this.button(/^Go on,/).click();
  }

  private async provePresence(): Promise<void> {
    const code = this.page.getByLabel('Type the code shown on the rig');
    const none = this.page.getByText('has no display fitted');
    await code.or(none).waitFor();
    if (await code.isVisible()) await this.type('Code', await this.readCode());
  }

  /** Enters the same length for every piece that is asked for, key by key. */
  async measure(lengthMm: string): Promise<void> {
    const pieces = this.page.getByLabel(/^Piece \d+$/);
    await pieces.first().waitFor();
    const count = await pieces.count();
    for (let index = 0; index < count; index += 1) {
      if (index > 0) await this.button('Next piece').click();
      await this.type('Length', lengthMm);
    }
    await this.button('Keep these lengths').click();
  }

  /** From now on keeps every count that the page shows. */
  async watchCounts(): Promise<void> {
    await this.page.evaluate(() => {
      const seen: number[] = [];
      (window as Watched).countsSeen = seen;
      const look = () => {
        const count = Number(document.querySelector('[data-count]')?.getAttribute('data-count') ?? NaN);
        if (!Number.isNaN(count) && count !== seen.at(-1)) seen.push(count);
      };
      new MutationObserver(look).observe(document.body, { subtree: true, childList: true, attributes: true });
      look();
    });
  }

  /** The counts seen since `watchCounts`, each once, in order. @throws Error when the page was loaded anew since */
  async countsSeen(): Promise<number[]> {
    const seen = await this.page.evaluate(() => (window as Watched).countsSeen);
    if (!seen) throw new Error('The page was loaded anew');
    return seen;
  }

  /** Waits until the page counts at least so many pieces, or asks to measure the last of them. */
  async hasCounted(pieces: number): Promise<void> {
    await this.page.waitForFunction(
      (wanted) =>
        Number(document.querySelector('[data-count]')?.getAttribute('data-count')) >= wanted ||
        document.getElementById(`length-${wanted}`) !== null,
      pieces,
    );
  }
}
