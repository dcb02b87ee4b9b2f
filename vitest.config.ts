import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vitest/config';

const alias = { '@': fileURLToPath(new URL('.', import.meta.url)).replace(/\/$/, '') };

/** `ELLWAND_WRITE_PICTURES=1 npx vitest run --project browser` takes the README's pictures anew instead of testing. */
const TAKES_PICTURES = process.env.ELLWAND_WRITE_PICTURES === '1';

/** Unit tests stand beside nothing else: no service, no network. The other projects need `npm test`. */
export default defineConfig({
  test: {
    projects: [
      {
        resolve: { alias },
        // The limits are for what hangs, not for a computer that is busy with something else.
        test: {
          name: 'unit',
          include: ['tests/unit/**/*.test.{ts,tsx}', 'tests/checks/**/*.test.ts'],
          testTimeout: 60_000,
        },
      },
      {
        resolve: { alias },
        test: {
          name: 'integration',
          include: ['tests/integration/**/*.test.ts'],
          globalSetup: ['tests/support/cluster.ts'],
          testTimeout: 60_000,
          hookTimeout: 60_000,
        },
      },
      {
        resolve: { alias },
        test: {
          name: 'browser',
          include: [TAKES_PICTURES ? 'tests/browser/**/*.picture.ts' : 'tests/browser/**/*.test.ts'],
          globalSetup: ['tests/support/web-build.ts', 'tests/support/browser-house.ts'],
          testTimeout: 180_000,
          hookTimeout: 120_000,
          fileParallelism: false,
        },
      },
    ],
  },
});
