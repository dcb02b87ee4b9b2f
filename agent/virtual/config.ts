import { readFileSync } from 'node:fs';
import { z } from 'zod';
import type { VirtualRigOptions } from './rig';
import { rigSettingsSchema, type RigInput } from './settings';

const pathsSchema = z.object({
  tty: z.string().min(1),
  control: z.string().min(1).optional(),
  tally: z.string().min(1).optional(),
});

/** One rig of a bench: its settings and the paths it is reached by. */
const benchRigSchema = rigSettingsSchema.extend(pathsSchema.shape);

/** The file of `agent/virtual/bench.ts`: `{"rigs":[{"name":"…","tty":"…","speed":1,…},…]}`. */
const benchSchema = z.object({ rigs: z.array(benchRigSchema).min(1).max(64) });

/** Reads the rigs of one bench. @throws ZodError or SyntaxError when the file is not such a list. */
export function readBench(path: string): VirtualRigOptions[] {
  return benchSchema.parse(JSON.parse(readFileSync(path, 'utf8'))).rigs;
}

/** Reads a rig's settings, and its paths where they are given, from a JSON file. */
export function readRigConfig(path: string): RigInput & Partial<z.output<typeof pathsSchema>> {
  return rigSettingsSchema.extend(pathsSchema.partial().shape).parse(JSON.parse(readFileSync(path, 'utf8')));
}
