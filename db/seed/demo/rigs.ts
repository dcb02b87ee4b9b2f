import type { Profile } from '@/lib/program/profile';

export interface DemoRig {
  name: string;
  bay: string;
  bladeLabel: string;
  profile: Profile;
  /** Only the virtual rig knows: how much more wire passes than the profile thinks, and how evenly. */
  mechanics: { feedExcess: number; slipSd: number };
}

/** A rig with everything but a wire switch, built from an old printer's frame. */
const COMMON: Profile = {
  cutAxis: {
    axis: 'Z',
    homing: 'endstop',
    homeMm: 5,
    standbyMm: 4,
    cutMm: 0.8,
    parkMm: 7,
    lowestMm: 0,
    highestMm: 20,
    speedMmS: 25,
    accelerationMmS2: 500,
    stepsPerMm: 100,
  },
  feed: {
    feedPerMm: 1,
    speedMmS: 50,
    accelerationMmS2: 800,
    longestMoveMm: 120,
    shortestPieceMm: 12,
    longestPieceMm: 2000,
    trimMm: 15,
  },
  registerAxis: 'Y',
  steppersHoldS: 120,
  fitted: {
    guardSwitch: { endstop: 'x_max', closedReads: 'TRIGGERED' },
    guardCutsMotorPower: true,
    hardwareStop: true,
    wireSwitch: false,
    display: true,
    beeper: true,
    heater: true,
    emergencyParser: true,
  },
  serial: { baudRate: 115200, resetsOnOpen: true },
};

interface Differences {
  feedPerMm?: number;
  registerAxis?: Profile['registerAxis'];
  resetsOnOpen?: boolean;
  baudRate?: Profile['serial']['baudRate'];
  fitted?: Partial<Profile['fitted']>;
}

function profileOf(differences: Differences): Profile {
  const { feedPerMm = COMMON.feed.feedPerMm, registerAxis = COMMON.registerAxis, fitted } = differences;
  return {
    ...COMMON,
    feed: { ...COMMON.feed, feedPerMm },
    registerAxis,
    fitted: { ...COMMON.fitted, ...fitted },
    serial: {
      baudRate: differences.baudRate ?? COMMON.serial.baudRate,
      resetsOnOpen: differences.resetsOnOpen ?? COMMON.serial.resetsOnOpen,
    },
  };
}

const rig = (name: string, bay: string, bladeLabel: string, differences: Differences): DemoRig => ({
  name,
  bay,
  bladeLabel,
  profile: profileOf(differences),
  mechanics: { feedExcess: 0.006, slipSd: 0.0008 },
});

/** In bench order. What is missing on a rig is missing on purpose: the screens then say what to look at instead. */
export const DEMO_RIGS: readonly DemoRig[] = [
  rig('Curlew', 'bay 1', 'B-0101', { fitted: { wireSwitch: true } }),
  rig('Dunlin', 'bay 1', 'B-0102', { feedPerMm: 1.018 }),
  rig('Knot', 'bay 1', 'B-0103', { fitted: { guardSwitch: null, guardCutsMotorPower: false } }),
  rig('Linnet', 'bay 2', 'B-0104', { feedPerMm: 0.992, resetsOnOpen: false, baudRate: 250000 }),
  rig('Pipit', 'bay 2', 'B-0105', { fitted: { wireSwitch: true, guardCutsMotorPower: false } }),
  rig('Plover', 'bay 2', 'B-0106', { fitted: { display: false, beeper: false } }),
  rig('Siskin', 'bay 3', 'B-0107', { registerAxis: null, fitted: { emergencyParser: false } }),
  rig('Wren', 'bay 3', 'B-0108', { feedPerMm: 1.007, fitted: { wireSwitch: true } }),
];

/** Which rigs stand beside which computer. */
export const DEMO_AGENTS = [
  { name: 'Bench computer, window side', rigs: ['Curlew', 'Dunlin', 'Knot', 'Linnet'] },
  { name: 'Bench computer, door side', rigs: ['Pipit', 'Plover', 'Siskin', 'Wren'] },
] as const;
