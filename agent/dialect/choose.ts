import type { Dialect } from './dialect';
import { marlin } from './marlin';
import { readRepetierReply, repetier } from './repetier';

/** The families that are spoken. */
export const DIALECTS: readonly Dialect[] = [marlin, repetier];

/** Before the firmware has named itself: what either family says is understood, nothing is taken for granted. */
export const greetingDialect: Dialect = { ...marlin, read: readRepetierReply };

/** The dialect by the name that `identify` gave. */
export function dialectNamed(name: string): Dialect {
  return DIALECTS.find((dialect) => dialect.name === name) ?? marlin;
}
