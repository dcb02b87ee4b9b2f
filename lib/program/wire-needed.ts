import type { Profile, RunOrder } from './profile';

/** Millimetres of wire that a run takes from the spool: its pieces and `trims` trims (one when nothing goes wrong). */
export function wireNeededMm(
  profile: Profile,
  order: Pick<RunOrder, 'pieces' | 'lengthMm'>,
  trims = 1,
): number {
  return trims * profile.feed.trimMm + order.pieces * order.lengthMm;
}
