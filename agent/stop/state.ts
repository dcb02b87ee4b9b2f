import { z } from 'zod';
import { rigReportSchema } from '@/lib/protocol/report';

/** What a running agent tells of itself to whoever asks on its own computer. */
export const agentStateSchema = z.object({
  software: z.string(),
  /** `report` is null for a rig that the server has not bound to this agent. */
  rigs: z.array(z.object({ rig: z.string(), report: rigReportSchema.nullable() })),
  journal: z.object({
    id: z.string(),
    /** Events that the server has not acknowledged, of the journal in use. */
    unacknowledged: z.number().int().min(0),
    /** Damaged journals before it whose events are still to go up. */
    earlier: z.number().int().min(0),
    full: z.boolean(),
    damaged: z.boolean(),
  }),
  /** What does not work between agent and server. */
  link: z.array(z.object({ topic: z.string(), code: z.string(), text: z.string() })),
  /** Server minus agent; 0 while nothing was measured. */
  clockSkewMs: z.number(),
});

export type AgentState = z.infer<typeof agentStateSchema>;
