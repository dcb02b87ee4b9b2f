/** Steps for one mm of wire: full steps · microsteps · gear / (π · d), d the feed wheel's diameter in mm (trade.md 9). */
export function stepsPerMm(drive: {
  fullSteps: number;
  microsteps: number;
  gear: number;
  wheelDiameterMm: number;
}): number {
  return (drive.fullSteps * drive.microsteps * drive.gear) / (Math.PI * drive.wheelDiameterMm);
}

/** The feed per mm that would have cut what was commanded: old · commanded / measured (trade.md 9). */
export function correctedFeedPerMm(feedPerMm: number, commandedMm: number, measuredMm: number): number {
  return (feedPerMm * commandedMm) / measuredMm;
}
