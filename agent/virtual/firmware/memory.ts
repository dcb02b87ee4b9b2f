import type { FirmwareSettings } from '../settings';
import { familyOf } from './family';

/** @returns what a board knows after a reset: nothing it was told. */
export function freshMemory(settings: FirmwareSettings) {
  return {
    coldFeedAllowed: false,
    softStops: familyOf(settings).softStops,
    jobRunning: false,
    reportsMissingWire: true,
    senderHandlesWire: false,
    wireMissingTold: false,
    steppersHoldMs: settings.steppersHoldS * 1000,
    displayText: '',
    temperatureEveryMs: 0,
    heatWaitBroken: false,
  };
}

export type Memory = ReturnType<typeof freshMemory>;
