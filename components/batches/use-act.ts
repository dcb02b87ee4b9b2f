'use client';

import { useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { ERRORS, type FieldProblem } from '@/lib/errors';
import type { ActionResult } from '@/lib/schemas/action-result';

export type BatchAction<Data> = (input: unknown) => Promise<ActionResult<Data>>;

export interface Refusal {
  title: string;
  fields: FieldProblem[];
  requestId?: string;
}

/** One server action with its state: `act` answers the data, or null and `refusal` says why. */
export function useAct<Data>(action: BatchAction<Data>) {
  const client = useQueryClient();
  const [busy, setBusy] = useState(false);
  const [refusal, setRefusal] = useState<Refusal | null>(null);

  async function act(input: unknown): Promise<{ data: Data } | null> {
    setBusy(true);
    setRefusal(null);
    // A refused connection rejects; what the server refuses comes back as a result.
    const result = await action(input).catch(() => null);
    setBusy(false);
    void client.invalidateQueries({ queryKey: ['batches'] });
    void client.invalidateQueries({ queryKey: ['batch'] });
    if (result?.ok) return { data: result.data };
    setRefusal(result ?? { title: ERRORS['service-away'].title, fields: [] });
    return null;
  }

  return { act, busy, refusal };
}
