'use client';

import { useLive } from '@/components/live/live-provider';
import { SelectField, TextField } from '@/components/ui/field';
import type { FieldProblem } from '@/lib/errors';
import { momentOfWallTime } from '@/lib/plan/wall-time';

/** Name, due time and priority as they are typed; `due` is of the workshop's clock. */
export interface HeadText {
  name: string;
  due: string;
  priority: number;
}

/** The due moment; null when there is none, undefined when what is typed is no time. */
export function dueOf(head: HeadText, timeZone: string): string | null | undefined {
  if (head.due === '') return null;
  return momentOfWallTime(head.due, timeZone) ?? undefined;
}

interface HeadFieldsProps {
  head: HeadText;
  fields: readonly FieldProblem[];
  onChange: (head: HeadText) => void;
}

function problemOf(fields: readonly FieldProblem[], path: string): string | undefined {
  return fields.find((field) => field.path === path)?.message;
}

/** The three fields that every batch has, however its lines came. */
export function HeadFields({ head, fields, onChange }: HeadFieldsProps) {
  const { timeZone } = useLive();
  return (
    <div className="grid gap-4 sm:grid-cols-[2fr_1fr_1fr]">
      <TextField
        label="Name"
        value={head.name}
        maxLength={80}
        autoComplete="off"
        error={problemOf(fields, 'name')}
        onChange={(event) => onChange({ ...head, name: event.target.value })}
      />
      <TextField
        label="Due"
        type="datetime-local"
        value={head.due}
        hint={`Clock of ${timeZone}; may stay empty.`}
        error={problemOf(fields, 'dueAt')}
        onChange={(event) => onChange({ ...head, due: event.target.value })}
      />
      <SelectField
        label="Priority"
        value={String(head.priority)}
        error={problemOf(fields, 'priority')}
        onChange={(event) => onChange({ ...head, priority: Number(event.target.value) })}
      >
        <option value="1">1, before all others</option>
        <option value="2">2</option>
        <option value="3">3, as usual</option>
        <option value="4">4</option>
        <option value="5">5, when nothing else is</option>
      </SelectField>
    </div>
  );
}
