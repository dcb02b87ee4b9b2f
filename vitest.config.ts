import { fileURLToPath } from 'node:url';
import { defineConfig } from 'vitest/config';
import { BaseSequencer, type TestSpecification } from 'vitest/node';

const alias = { '@': fileURLToPath(new URL('.', import.meta.url)).replace(/\/$/, '') };

/** These take longest, from two minutes down; begun last, one of them would run alone at the end. */
const SLOW = ['agent-mishaps', 'agent-kill', 'redis', 'batches', 'agent-start-refused', 'jobs', 'agent-run'];

class SlowFirst extends BaseSequencer {
  override async sort(files: TestSpecification[]): Promise<TestSpecification[]> {
    const rest = await super.sort(files);
    const slow = SLOW.flatMap((name) => rest.filter(({ moduleId }) => moduleId.endsWith(`/${name}.test.ts`)));
    return [...slow, ...rest.filter((file) => !slow.includes(file))];
  }
}

/** `ELLWAND_WRITE_PICTURES=1 npx vitest run --project browser` takes the README's pictures anew instead of testing. */
const TAKES_PICTURES = process.env.ELLWAND_WRITE_PICTURES === '1';

/** Unit tests stand beside nothing else: no service, no network. The other projects need `npm test`. */
export default defineConfig({
  test: {
    sequence: { sequencer: SlowFirst },
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
