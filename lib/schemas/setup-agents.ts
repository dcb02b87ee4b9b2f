import { z } from 'zod';

const moment = z.iso.datetime();
const agentId = z.uuid();
const rigIds = z.array(z.uuid()).max(64, 'At most 64 rigs.');

export const addAgentSchema = z.object({
  name: z.string().trim().min(1, 'Give the agent a name.').max(60, 'At most 60 characters.'),
  rigIds,
});
export const bindRigsSchema = z.object({ agentId, rigIds });
export const agentIdSchema = z.object({ agentId });

export const agentDtoSchema = z.object({
  id: z.uuid(),
  name: z.string(),
  rigs: z.array(z.object({ id: z.uuid(), name: z.string() })),
  /** `waiting`: a code is out and not used. `no code`: neither a token nor a code that still works. */
  pairing: z.enum(['paired', 'waiting', 'no code', 'revoked']),
  pairingExpiresAt: moment.nullable(),
  pairedAt: moment.nullable(),
  /** As the agent last told it; null: never heard. */
  software: z.string().nullable(),
  /** It is given nothing to start until a newer one takes its place. */
  tooOld: z.boolean(),
  lastReportAt: moment.nullable(),
});

/** The code is told this once; what is stored is its digest. */
export const pairingOfferDtoSchema = z.object({
  agentId: z.uuid(),
  agentName: z.string(),
  code: z.string(),
  expiresAt: moment,
});

export type AgentDto = z.infer<typeof agentDtoSchema>;
export type PairingOfferDto = z.infer<typeof pairingOfferDtoSchema>;
