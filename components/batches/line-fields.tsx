'use client';

import type { KeyboardEvent } from 'react';
import { Button } from '@/components/ui/button';
import { wireHexes } from '@/components/ui/wire-line';
import type { FieldProblem } from '@/lib/errors';
import type { WireDto } from '@/lib/schemas/stock';
import { fullWireName } from '@/lib/wire/name';
import { type FormRow, type RowField, rowProblem } from './form-rows';

const CELL =
  'min-h-11 w-full rounded-[2px] border border-tick bg-sheet px-2 text-ink focus:border-ink disabled:border-dashed disabled:text-soft aria-invalid:border-2 aria-invalid:border-signal';

interface LineFieldsProps {
  row: FormRow;
  index: number;
  wires: readonly WireDto[];
  fields: readonly FieldProblem[];
  onType: (field: RowField, text: string) => void;
  onRemove: () => void;
  /** Return in a field: on to the next line, or a new one. */
  onNext: () => void;
}

const WORDS: Record<RowField, string> = {
  label: 'Label',
  wireId: 'Wire',
  length: 'Length',
  pieces: 'Pieces',
  minus: 'Tolerance minus',
  plus: 'Tolerance plus',
};

/** One line of the form: six cells and a way to take it out. */
export function LineFields({ row, index, wires, fields, onType, onRemove, onNext }: LineFieldsProps) {
  const wire = wires.find(({ id }) => id === row.wireId);
  const place = index + 1;
  const problems = (Object.keys(WORDS) as RowField[]).flatMap((field) => {
    const message = rowProblem(fields, index, field);
    return message === undefined ? [] : [{ field, message }];
  });
  const cell = (field: RowField) => ({
    id: `${field}-${row.key}`,
    'aria-label': `${WORDS[field]}, line ${place}`,
    'aria-invalid': problems.some((problem) => problem.field === field) ? true : undefined,
    'aria-describedby': problems.length > 0 ? `problems-${row.key}` : undefined,
    value: row[field],
    onChange: (event: { target: { value: string } }) => onType(field, event.target.value),
    onKeyDown: (event: KeyboardEvent) => {
      if (event.key !== 'Enter' || event.ctrlKey || event.metaKey) return;
      event.preventDefault();
      onNext();
    },
    className: CELL,
  });
  const fixed = row.committed > 0;
  return (
    <li className="border-b border-line py-2">
      <div className="grid grid-cols-2 items-center gap-2 md:grid-cols-[2rem_1.5fr_2.5fr_1fr_1fr_0.7fr_0.7fr_2.75rem]">
        <span className="figure hidden text-right text-soft md:block">{place}</span>
        <input {...cell('label')} autoComplete="off" maxLength={80} placeholder="Label" />
        <div className="flex items-center gap-2">
          <span
            aria-hidden
            className="h-11 w-1.5 shrink-0 border border-tick"
            style={{ background: wire ? wireHexes(wire.colour)[0] : 'none' }}
          />
          <select {...cell('wireId')} disabled={fixed}>
            <option value="">Pick a wire</option>
            {wires.map((one) => (
              <option key={one.id} value={one.id}>
                {fullWireName(one)}
              </option>
            ))}
          </select>
        </div>
        <input
          {...cell('length')}
          disabled={fixed}
          inputMode="decimal"
          autoComplete="off"
          placeholder="63.5"
        />
        <input {...cell('pieces')} inputMode="numeric" autoComplete="off" placeholder="40" />
        <input {...cell('minus')} disabled={fixed} inputMode="decimal" autoComplete="off" />
        <input {...cell('plus')} disabled={fixed} inputMode="decimal" autoComplete="off" />
        <Button disabled={fixed} onClick={onRemove} aria-label={`Take line ${place} out`} className="px-0">
          <span aria-hidden>×</span>
        </Button>
      </div>
      {fixed ? (
        <p className="mt-1 text-sm text-soft md:pl-10">
          {row.committed} pieces are cut or on a rig: they stay. Pieces may not go below {row.committed}.
        </p>
      ) : null}
      {problems.length > 0 ? (
        <p id={`problems-${row.key}`} className="mt-1.5 text-sm font-bold text-signal md:pl-10">
          {problems.map(({ field, message }) => `${WORDS[field]}: ${message}`).join(' ')}
        </p>
      ) : null}
    </li>
  );
}
