'use client';

import { useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { ERRORS, type ErrorCode, type FieldProblem } from '@/lib/errors';
import type { ActionResult } from '@/lib/schemas/action-result';
import type { CommandOutcome } from '@/lib/schemas/run';
import { useRunActions, type RunVerb } from './run-actions';

export interface RunProblem {
  code: string;
  title: string;
  fields: FieldProblem[];
  requestId?: string;
}

function titleOf(code: string | null): string {
  return code !== null && code in ERRORS ? ERRORS[code as ErrorCode].title : ERRORS.unexpected.title;
}

/** What a refusal, by the server or by the rig, is to the person; null when it was done. */
export function problemOf(result: ActionResult<CommandOutcome | null>): RunProblem | null {
  if (!result.ok) return result;
  const outcome = result.data;
  if (outcome?.outcome === 'refused') {
    return { code: outcome.code ?? 'unexpected', title: titleOf(outcome.code), fields: [] };
  }
  if (outcome?.outcome === 'waiting') {
    return {
      code: 'command-late',
      title: 'The rig has not answered yet. Look at the rig before you try again.',
      fields: [],
    };
  }
  return null;
}

/** One verb with its state: busy while it runs, the problem it met; `act` says whether it was done. */
export function useRunAction(verb: RunVerb) {
  const actions = useRunActions();
  const client = useQueryClient();
  const [busy, setBusy] = useState(false);
  const [problem, setProblem] = useState<RunProblem | null>(null);

  async function act(input: unknown): Promise<boolean> {
    setBusy(true);
    setProblem(null);
    try {
      const met = problemOf(await actions[verb](input));
      setProblem(met);
      return met === null;
    } catch {
      setProblem({
        code: 'service-away',
        title: 'Ellwand is not heard. Nothing is sure: look at the rig.',
        fields: [],
      });
      return false;
    } finally {
      setBusy(false);
      void client.invalidateQueries({ queryKey: ['rig'] });
    }
  }

  return { act, busy, problem, forget: () => setProblem(null) };
}
