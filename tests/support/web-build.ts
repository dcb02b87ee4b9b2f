import { TEST_NEXT_DIST } from '@/scripts/house/settings.mjs';
import { ensureWebBuild } from '@/scripts/house/web-build.mjs';

/** Vitest's global set-up of the browser tests: the web is built once, when its sources have changed. */
export default async function setUp(): Promise<void> {
  await ensureWebBuild({ nextDist: TEST_NEXT_DIST, say: console.error });
}
