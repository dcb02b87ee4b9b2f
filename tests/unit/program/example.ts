import type { Profile, RunOrder } from '@/lib/program/profile';

/** A rig with everything: end stop, wire switch, register. */
export const exampleProfile: Profile = {
  cutAxis: {
    axis: 'Z',
    homing: 'endstop',
    homeMm: 10,
    standbyMm: 4,
    cutMm: -1.5,
    parkMm: 12,
    lowestMm: -2,
    highestMm: 20,
    speedMmS: 50,
    accelerationMmS2: 1000,
    stepsPerMm: 400,
  },
  feed: {
    feedPerMm: 1.02,
    speedMmS: 60,
    accelerationMmS2: 800,
    longestMoveMm: 120,
    shortestPieceMm: 10,
    longestPieceMm: 3000,
    trimMm: 8,
  },
  registerAxis: 'Y',
  steppersHoldS: 120,
  fitted: {
    guardSwitch: { endstop: 'x_min', closedReads: 'TRIGGERED' },
    guardCutsMotorPower: true,
    hardwareStop: true,
    wireSwitch: true,
    display: true,
    beeper: true,
    heater: false,
    emergencyParser: true,
  },
  serial: { baudRate: 115200, resetsOnOpen: true },
};

export const exampleOrder: RunOrder = { tag: 42, pieces: 3, lengthMm: 250 };
