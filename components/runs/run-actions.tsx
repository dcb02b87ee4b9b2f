'use client';

import { createContext, useContext, type ReactNode } from 'react';
import type { ActionResult } from '@/lib/schemas/action-result';
import type { CommandOutcome } from '@/lib/schemas/run';

/** What can be done to a run or its rig; each is a server action that parses its input by the schema of its name. */
export const RUN_VERBS = [
  'acknowledgeNotes',
  'showCode',
  'start',
  'goOn',
  'pause',
  'stop',
  'hold',
  'settlePiece',
  'measurePieces',
  'scrapPieces',
  'clearTray',
  'releaseLot',
  'beginWorkHold',
  'endWorkHold',
] as const;
export type RunVerb = (typeof RUN_VERBS)[number];

/** `null` where nothing was asked of the rig. */
export type RunAction = (input: unknown) => Promise<ActionResult<CommandOutcome | null>>;
export type RunActions = Record<RunVerb, RunAction>;

const RunActionsContext = createContext<RunActions | null>(null);

/** Hands the server's actions down to the components, which may not import them. */
export function RunActionsProvider({ actions, children }: { actions: RunActions; children: ReactNode }) {
  return <RunActionsContext value={actions}>{children}</RunActionsContext>;
}

/** @throws Error outside a `RunActionsProvider`. */
export function useRunActions(): RunActions {
  const actions = useContext(RunActionsContext);
  if (!actions) throw new Error('useRunActions needs a RunActionsProvider above it');
  return actions;
}
