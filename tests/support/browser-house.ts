import type { TestProject } from 'vitest/node';
import { startTestHouse } from './house';

/** What browser tests need to know of the demo house that they share. */
export interface SharedHouse {
  url: string;
  /** Below it lie the virtual rigs' control sockets and tallies, and what runs. */
  dataDir: string;
  password: string;
}

declare module 'vitest' {
  export interface ProvidedContext {
    house: SharedHouse;
  }
}

/** A piece of 50 mm then takes some 150 ms: fast for a test, slow enough to be seen rising. */
const RIG_SPEED = 8;

/**
 * Vitest's global set-up of the browser tests: one demo house for all of them. Each file takes rigs of its own:
 * whole-path Dunlin, Curlew and Pipit; refusals Wren; pages Linnet; live Siskin.
 */
export default async function setUp(project: TestProject): Promise<() => Promise<void>> {
  const house = await startTestHouse({ demo: true, rigSpeed: RIG_SPEED });
  const { url, dataDir, accounts } = house;
  if (!accounts) {
    await house.stop();
    throw new Error('The demo house has no accounts');
  }
  project.provide('house', { url, dataDir, password: accounts.password });
  return () => house.stop();
}
