/** Every link inside Ellwand, typed once. */
export const routes = {
  floor: () => '/',
  rig: (rigId: string) => `/rigs/${rigId}`,
  label: (runId: string) => `/labels/${runId}`,
  batches: () => '/batches',
  batch: (batchId: string) => `/batches/${batchId}`,
  newBatch: () => '/batches/new',
  uploadBatch: () => '/batches/upload',
  setup: () => '/setup',
  signIn: () => '/sign-in',
  firstOwner: () => '/first-owner',
} as const;
