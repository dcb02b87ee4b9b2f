/** One thing left out of the agent, as text in its source, and seeds by which that must come out. */
export interface Mutant {
  name: string;
  leftOut: string;
  edits: readonly { file: string; find: string; replace: string }[];
  seeds: readonly number[];
}

/** Each shows that the harness would see the loss of what it names. */
export const MUTANTS: readonly Mutant[] = [
  {
    name: 'register',
    leftOut: 'the count that the rig itself remembers',
    edits: [
      {
        file: 'agent/runner/standing.ts',
        find: 'const counted = registerOf(run, profile, position);',
        replace: 'const counted: ReturnType<typeof registerOf> = run.cut;',
      },
    ],
    seeds: [805, 2329],
  },
  {
    name: 'check',
    leftOut: 'the look at feed, cut axis and refusals before a piece is registered',
    edits: [
      {
        file: 'agent/runner/step-answers.ts',
        find: 'if (!right) return wrong(turn, position);',
        replace: 'if (!right) return true;',
      },
      {
        file: 'agent/runner/step-answers.ts',
        find: "if (run.refusal !== null && run.mode === 'moving' && !registered) {",
        replace: 'if (Number.isNaN(turn.nowMs)) {',
      },
    ],
    seeds: [1447, 3058],
  },
  {
    name: 'sync',
    leftOut: 'the wait until a note is on disk before its line goes out',
    edits: [
      {
        file: 'agent/journal/file-journal.ts',
        find: "await this.#append({ type: 'note', note });",
        replace: "setTimeout(() => void this.#append({ type: 'note', note }).catch(() => undefined), 400);",
      },
    ],
    seeds: [862, 2371],
  },
];
