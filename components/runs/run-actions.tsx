'use client';

import { createContext, useContext, useMemo, type ReactNode } from 'react';
import type { ActionResult } from '@/lib/schemas/action-result';
import type { CommandOutcome } from '@/lib/schemas/run';
import { postStop } from './post-stop';

/** What can be done to a run, its rig or its alarms; each is a server action that parses its input by the schema of its name. */
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
  'acknowledgeAlarm',
  'dropRun',
  'confirmBag',
] as const;
export type RunVerb = (typeof RUN_VERBS)[number];

/** `null` where nothing was asked of the rig. */
export type RunAction = (input: unknown) => Promise<ActionResult<CommandOutcome | null>>;
export type RunActions = Record<RunVerb, RunAction>;
/** What the server's actions do; pause and stop go their own way. */
export type ServerRunActions = Omit<RunActions, 'pause' | 'stop'>;

const STOPS = { pause: postStop('pause'), stop: postStop('stop') };

const RunActionsContext = createContext<RunActions | null>(null);

/** Hands the server's actions down to the components, which may not import them. */
export function RunActionsProvider({
  actions,
  children,
}: {
  actions: ServerRunActions;
  children: ReactNode;
}) {
  const all = useMemo(() => ({ ...actions, ...STOPS }), [actions]);
  return <RunActionsContext value={all}>{children}</RunActionsContext>;
}

/** @throws Error outside a `RunActionsProvider`. */
export function useRunActions(): RunActions {
  const actions = useContext(RunActionsContext);
  if (!actions) throw new Error('useRunActions needs a RunActionsProvider above it');
  return actions;
}
