import { z } from 'zod';
import { profileSchema } from '@/lib/program/profile';

/** `POST /api/agent/pair`: the one-time code buys a token. */
export const pairingSchema = z.object({
  protocol: z.literal(1),
  code: z.string().min(8).max(40),
  software: z.string().max(40),
  /** The token that the agent made and would go by: asked again with it after a lost answer, it is paired once. */
  token: z.string().min(32).max(128).optional(),
});

/** The token is told this once and stored hashed. */
export const pairingAnswerSchema = z.object({
  agentId: z.uuid(),
  name: z.string(),
  token: z.string().min(32),
});

/** `GET /api/agent/rigs`: the rigs the token is bound to, with their profile in force. */
export const boundRigsSchema = z.object({
  rigs: z.array(
    z.object({
      rigId: z.uuid(),
      name: z.string(),
      fence: z.number().int().min(0),
      profileVersion: z.number().int().min(1),
      profile: profileSchema,
    }),
  ),
});

/** `GET /api/agent/runs/{runId}/program`: everything the agent needs to finish without the server. */
export const runProgramSchema = z.object({
  runId: z.uuid(),
  rigId: z.uuid(),
  fence: z.number().int().min(0),
  tag: z.number().int().min(1).max(99),
  pieces: z.number().int().min(1).max(9999),
  lengthMm: z.number().positive(),
  /** After so many pieces the run is held until somebody has measured them; 0: never. */
  firstPieces: z.number().int().min(0).max(50),
  wireId: z.uuid(),
  profileVersion: z.number().int().min(1),
  profile: profileSchema,
  programSha256: z.string().length(64),
  program: z.string().max(4_000_000),
});

export type Pairing = z.infer<typeof pairingSchema>;
export type PairingAnswer = z.infer<typeof pairingAnswerSchema>;
export type BoundRigs = z.infer<typeof boundRigsSchema>;
export type RunProgram = z.infer<typeof runProgramSchema>;
