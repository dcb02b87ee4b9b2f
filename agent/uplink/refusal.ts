import type { ErrorCode } from '@/lib/errors';
import type { CommandAnswer } from '@/lib/protocol/commands';
import { PROTOCOL_VERSION } from '@/lib/protocol/version';

/** The answer to a command that cannot be carried out. Unknown means unknown in this version: the answer says which. */
export function refusalOf(code: ErrorCode, at: string): CommandAnswer {
  const refusal = { outcome: 'refused', at, code } as const;
  return code === 'protocol-unknown' ? { ...refusal, details: { spoken: PROTOCOL_VERSION } } : refusal;
}
