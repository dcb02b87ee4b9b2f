import { join } from 'node:path';
import axe, { type AxeResults } from 'axe-core';
import type { Page } from 'playwright-core';
import { AT_A_DESK, AT_THE_RIG } from './browser-desk';
import { LOOK_DIR } from './browser-pictures';

/** Smallest target at a desk; what is pressed at a rig is larger. */
const DESK_PX = 44;
export const RIG_PX = 64;
/** Half a pixel of rounding. */
const SLACK_PX = 0.5;

interface AuditOptions {
  /** Targets of buttons in the page's main part. */
  buttonPx?: number;
}

/**
 * What is wrong with a page at both sizes, in words; empty when nothing is: axe's rules, sideways scrolling, targets
 * too low for a finger. With `ELLWAND_LOOK_DIR` it also leaves a picture of each there, for the eye.
 */
export async function auditPage(page: Page, name: string, options: AuditOptions = {}): Promise<string[]> {
  const found: string[] = [];
  for (const size of [AT_A_DESK, AT_THE_RIG]) {
    await page.setViewportSize(size);
    const said = [
      ...(await brokenRules(page)),
      ...(await sidewaysScroll(page)),
      ...(await lowTargets(page, options.buttonPx ?? DESK_PX)),
    ];
    found.push(...said.map((one) => `${name}, ${size.width} px: ${one}`));
    const file = `${name.replaceAll(' ', '-')}-${size.width}.png`;
    if (LOOK_DIR) await page.screenshot({ path: join(LOOK_DIR, file) });
  }
  return found;
}

/** The page's window once axe was handed to it. */
interface AuditedWindow {
  axe: { run: (root: Document, options: { resultTypes: string[] }) => Promise<AxeResults> };
}

async function brokenRules(page: Page): Promise<string[]> {
  if (!(await page.evaluate(() => 'axe' in window))) await page.evaluate(axe.source);
  return page.evaluate(async () => {
    const { violations } = await (window as unknown as AuditedWindow).axe.run(document, {
      resultTypes: ['violations'],
    });
    return violations.flatMap(({ id, nodes }) =>
      nodes.map((node) => `${id} at ${node.target.join(' ')}: ${node.failureSummary ?? ''}`),
    );
  });
}

function sidewaysScroll(page: Page): Promise<string[]> {
  return page.evaluate(() => {
    const { scrollWidth, clientWidth } = document.documentElement;
    return scrollWidth > clientWidth ? [`scrolls sideways by ${scrollWidth - clientWidth} px`] : [];
  });
}

/** Links in the middle of a sentence are as high as their line; a tick box is as large as its label. */
function lowTargets(page: Page, buttonPx: number): Promise<string[]> {
  const limits = { buttonPx: buttonPx - SLACK_PX, otherPx: DESK_PX - SLACK_PX };
  return page.evaluate(({ buttonPx, otherPx }) => {
    const targets = [
      ...document.querySelectorAll<HTMLElement>('a, button, input, select, textarea, summary'),
    ];
    return targets.flatMap((target) => {
      const place = target.matches('[type=checkbox]') ? (target.closest('label') ?? target) : target;
      const { height, width } = place.getBoundingClientRect();
      const isHidden = !target.checkVisibility() || target.matches('.sr-only');
      const isInSentence = target.matches('a') && getComputedStyle(target).display === 'inline';
      const atRig = target.matches('main button');
      if (isHidden || isInSentence || (height >= (atRig ? buttonPx : otherPx) && width >= otherPx)) return [];
      const words = target.textContent?.trim() || target.getAttribute('aria-label') || target.id;
      return [
        `target too small: ${target.tagName} "${words}" ${Math.round(width)} × ${Math.round(height)} px`,
      ];
    });
  }, limits);
}
