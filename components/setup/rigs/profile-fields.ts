import type { Profile } from '@/lib/program/profile';

/** The numbers of a profile, section by section: how each is asked for. `path` is its place in the profile. */
export interface NumberField {
  path: string;
  label: string;
  hint?: string;
}

export const CUT_AXIS_NUMBERS: readonly NumberField[] = [
  {
    path: 'cutAxis.homeMm',
    label: 'Home, mm',
    hint: 'What home is called, so that it can be crossed both ways.',
  },
  {
    path: 'cutAxis.standbyMm',
    label: 'Standby, mm',
    hint: 'The pusher touches the handles, the jaws are open.',
  },
  { path: 'cutAxis.cutMm', label: 'Cut, mm', hint: 'The jaws are shut and the wire is through.' },
  { path: 'cutAxis.parkMm', label: 'Park, mm', hint: 'Clear of the handles, at the end of a run.' },
  { path: 'cutAxis.lowestMm', label: 'Lowest, mm', hint: 'No program goes below.' },
  { path: 'cutAxis.highestMm', label: 'Highest, mm', hint: 'No program goes above.' },
  { path: 'cutAxis.speedMmS', label: 'Speed, mm/s', hint: 'No more than the firmware’s own limit (M203).' },
  { path: 'cutAxis.accelerationMmS2', label: 'Acceleration, mm/s²', hint: 'The firmware’s own (M201).' },
  { path: 'cutAxis.stepsPerMm', label: 'Steps per mm', hint: 'The firmware’s own (M92).' },
];

export const FEED_NUMBERS: readonly NumberField[] = [
  {
    path: 'feed.feedPerMm',
    label: 'Feed units for 1 mm of wire',
    hint: 'The calibration: 1 when E counts true mm.',
  },
  { path: 'feed.speedMmS', label: 'Speed, mm of wire per s' },
  { path: 'feed.accelerationMmS2', label: 'Acceleration, mm/s²' },
  { path: 'feed.longestMoveMm', label: 'Longest move, mm', hint: 'At most 150; longer feeds are split.' },
  { path: 'feed.shortestPieceMm', label: 'Shortest piece, mm' },
  { path: 'feed.longestPieceMm', label: 'Longest piece, mm' },
  { path: 'feed.trimMm', label: 'Trim, mm', hint: 'What the cut that squares the end throws away.' },
];

export const HOLD_NUMBER: NumberField = {
  path: 'steppersHoldS',
  label: 'Steppers stay on in a pause, s',
  hint: 'From 10 to 3,600. Afterwards the rig homes before it moves on.',
};

type FittedFlag = Exclude<keyof Profile['fitted'], 'guardSwitch'>;

/** What may be fitted beside the guard switch, with what is meant. */
export const FITTED_FLAGS: readonly { flag: FittedFlag; label: string; hint: string }[] = [
  {
    flag: 'guardCutsMotorPower',
    label: 'The guard cuts motor power',
    hint: 'Wired into the supply, no software.',
  },
  { flag: 'hardwareStop', label: 'Hardware stop', hint: 'A latching stop within reach.' },
  { flag: 'wireSwitch', label: 'Wire switch', hint: 'Says whether there is wire at the guide.' },
  { flag: 'display', label: 'Display', hint: 'Shows the code that proves somebody is there.' },
  { flag: 'beeper', label: 'Beeper', hint: '' },
  { flag: 'heater', label: 'Heater thermistor', hint: 'Its heater is read as off before anything moves.' },
  {
    flag: 'emergencyParser',
    label: 'Emergency parser',
    hint: 'The firmware acts on M112 at once; tried on this rig.',
  },
];
