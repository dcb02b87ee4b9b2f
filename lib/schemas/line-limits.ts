/** What one line of a batch may hold; read by the form, the upload and the service. */
export const LINE_LIMITS = {
  labelCharactersMost: 80,
  lengthMostMm: 20_000,
  toleranceMostMm: 1000,
  piecesMost: 100_000,
  linesMost: 2000,
} as const;
