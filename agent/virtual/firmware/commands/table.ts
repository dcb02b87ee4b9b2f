import type { Command } from '../command';
import type { Firmware } from '../firmware';
import { heatCommands } from './heat';
import { jobCommands } from './job';
import { motionCommands } from './motion';
import { positionCommands } from './position';
import { reportCommands } from './report';
import { settingCommands } from './settings';
import { stopCommands } from './stop';

/** Something a command waits for before it goes on. */
export interface Wait {
  isOver: (nowMs: number) => boolean;
  /** When it will be over, where that is known; a wait for motion is woken by the moves themselves. */
  dueAt?: () => number | undefined;
}

/** A command under way. What it returns is sent in place of the plain `ok`. */
export type Run = Generator<Wait, string | undefined | void, void>;

/** `undefined` where this build does not know the command after all. */
export type Handler = (firmware: Firmware, command: Command) => Run | undefined;

export type Commands = Readonly<Record<string, Handler>>;

/** Every command this firmware is built with, by code. */
export const commandTable: ReadonlyMap<string, Handler> = new Map(
  [
    motionCommands,
    positionCommands,
    settingCommands,
    reportCommands,
    heatCommands,
    jobCommands,
    stopCommands,
  ].flatMap((commands) => Object.entries(commands)),
);
