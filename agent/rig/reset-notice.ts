/**
 * What a person is told when a board's opening went otherwise than its profile says. One opening proves little: a
 * board that was just plugged in starts anyway, and one that resets only after a hang-up does not at each opening.
 * @returns null when it went as the profile says
 */
export function resetNotice(resetsByProfile: boolean, bannerSeen: boolean): string | null {
  if (resetsByProfile === bannerSeen) return null;
  return bannerSeen
    ? 'The board began anew when its port was opened; its profile says it does not. If it does so each time, set "resets on open" in the profile.'
    : 'The board did not begin anew when its port was opened; its profile says it does. If it never does, clear "resets on open" in the profile: it is met 3 s sooner.';
}
