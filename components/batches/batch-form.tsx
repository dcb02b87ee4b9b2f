'use client';

import { type KeyboardEvent, useEffect, useReducer, useRef, useState } from 'react';
import { useLive } from '@/components/live/live-provider';
import { Button } from '@/components/ui/button';
import { Problem } from '@/components/ui/problem';
import type { FieldProblem } from '@/lib/errors';
import type { ChangedLine } from '@/lib/schemas/batches';
import type { WireDto } from '@/lib/schemas/stock';
import { changeRows, type FormRows, linesOfRows, type Usual } from './form-rows';
import { dueOf, HeadFields, type HeadText } from './head-fields';
import { LineFields } from './line-fields';
import type { Refusal } from './use-act';

/** What the form hands over once it is all right. */
export interface BatchFormInput {
  name: string;
  dueAt: string | null;
  priority: number;
  lines: ChangedLine[];
}

/** A button at the foot; the first is what Ctrl and Return do. */
export interface FormSubmit {
  title: string;
  look?: 'plain' | 'ink';
  submit: (input: BatchFormInput) => Promise<void>;
}

interface BatchFormProps {
  head: HeadText;
  rows: FormRows;
  wires: readonly WireDto[];
  usual: Usual;
  busy: boolean;
  refusal: Refusal | null;
  submits: readonly FormSubmit[];
}

/** Problems that stand at a field already need no second line at the top. */
function atNoField(fields: readonly FieldProblem[]): FieldProblem[] {
  return fields.filter(({ path }) => !/^(name|dueAt|priority|lines\.\d+\..+)$/.test(path));
}

function ColumnHeads() {
  return (
    <div
      aria-hidden
      className="hidden gap-2 border-b border-ink pb-1 text-sm font-bold md:grid md:grid-cols-[2rem_1.5fr_2.5fr_1fr_1fr_0.7fr_0.7fr_2.75rem]"
    >
      <span />
      <span>Label</span>
      <span>Wire</span>
      <span>Length, mm</span>
      <span>Pieces</span>
      <span>− mm</span>
      <span>+ mm</span>
    </div>
  );
}

/** A batch by hand: Return goes to the next line and makes one at the end, Ctrl and Return saves. */
export function BatchForm(props: BatchFormProps) {
  const { wires, usual, busy, refusal, submits } = props;
  const { timeZone } = useLive();
  const [head, setHead] = useState(props.head);
  const [state, change] = useReducer(changeRows, props.rows);
  const [found, setFound] = useState<FieldProblem[]>([]);
  const wantFocus = useRef<number | null>(null);
  const lastKey = state.rows.at(-1)?.key;
  const fields = [...found, ...(refusal?.fields ?? [])];

  useEffect(() => {
    if (wantFocus.current === null) return;
    document.getElementById(`label-${wantFocus.current}`)?.focus();
    wantFocus.current = null;
  }, [lastKey]);

  function next(index: number) {
    const following = state.rows[index + 1];
    if (following) return document.getElementById(`label-${following.key}`)?.focus();
    wantFocus.current = state.nextKey;
    change({ act: 'add', usual });
  }

  async function hand(over: FormSubmit) {
    const { lines, fields: ofLines } = linesOfRows(state.rows);
    const dueAt = dueOf(head, timeZone);
    const ofHead: FieldProblem[] = [
      ...(head.name.trim() === '' ? [{ path: 'name', message: 'Give the batch a name.' }] : []),
      ...(dueAt === undefined
        ? [{ path: 'dueAt', message: 'Pick a day and a time, or leave it empty.' }]
        : []),
    ];
    setFound([...ofHead, ...ofLines]);
    if (ofHead.length > 0 || ofLines.length > 0 || dueAt === undefined) return;
    await over.submit({ name: head.name, dueAt, priority: head.priority, lines });
  }

  function onKeyDown(event: KeyboardEvent) {
    const [first] = submits;
    if (event.key !== 'Enter' || !(event.ctrlKey || event.metaKey) || !first || busy) return;
    event.preventDefault();
    void hand(first);
  }

  return (
    <form
      noValidate
      className="page grid gap-6 py-6"
      onSubmit={(event) => event.preventDefault()}
      onKeyDown={onKeyDown}
    >
      {found.length > 0 ? <Problem title="Something is missing. Look at the marked fields." /> : null}
      {refusal ? <Problem {...refusal} fields={atNoField(refusal.fields)} /> : null}
      <HeadFields head={head} fields={fields} onChange={setHead} />
      <section aria-labelledby="lines-title">
        <h2 id="lines-title" className="text-xl">
          Lines
        </h2>
        <p className="mb-3 text-soft">
          Lengths in mm, or with their unit: 2.5in. Return goes to the next line, Ctrl and Return saves.
        </p>
        <ColumnHeads />
        <ol>
          {state.rows.map((row, index) => (
            <LineFields
              key={row.key}
              row={row}
              index={index}
              wires={wires}
              fields={fields}
              onType={(field, text) => change({ act: 'type', key: row.key, field, text })}
              onRemove={() => change({ act: 'remove', key: row.key, usual })}
              onNext={() => next(index)}
            />
          ))}
        </ol>
        <Button className="mt-3" onClick={() => next(state.rows.length - 1)}>
          Add a line
        </Button>
      </section>
      <div className="flex flex-wrap gap-3 border-t border-line pt-4">
        {submits.map((one) => (
          <Button key={one.title} look={one.look} disabled={busy} onClick={() => void hand(one)}>
            {one.title}
          </Button>
        ))}
      </div>
    </form>
  );
}
