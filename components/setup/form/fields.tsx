'use client';

import type { ComponentProps, ReactNode } from 'react';
import { CheckField, SelectField, TextArea, TextField } from '@/components/ui/field';
import { useField } from './form-state';

type Path = { path: string };
type Own = 'id' | 'name' | 'error';

/** A line of text; its error, if the answer has one for its path, stands beneath it. */
export function FormText({ path, ...rest }: Omit<ComponentProps<typeof TextField>, Own> & Path) {
  return <TextField autoComplete="off" {...rest} {...useField(path)} />;
}

/** A number with a decimal point or comma; the schema says what is wrong with it, not the browser. */
export function FormNumber({ path, ...rest }: Omit<ComponentProps<typeof TextField>, Own> & Path) {
  const field = useField(path);
  return <TextField inputMode="decimal" autoComplete="off" className="figure" {...rest} {...field} />;
}

/** Several lines of text. */
export function FormArea({ path, ...rest }: Omit<ComponentProps<typeof TextArea>, Own> & Path) {
  return <TextArea {...rest} {...useField(path)} />;
}

/** One of a list. */
export function FormSelect({ path, ...rest }: Omit<ComponentProps<typeof SelectField>, Own> & Path) {
  return <SelectField {...rest} {...useField(path)} />;
}

/** Yes or no. */
export function FormCheck({ path, ...rest }: ComponentProps<typeof CheckField> & Path) {
  const { id, name } = useField(path);
  return <CheckField {...rest} id={id} name={name} />;
}

interface Choice {
  value: string;
  label: ReactNode;
  hint?: ReactNode;
}

/** Any number of a list, as tick boxes under one heading. */
export function FormChoices({
  path,
  legend,
  choices,
  chosen = [],
}: Path & { legend: string; choices: readonly Choice[]; chosen?: readonly string[] }) {
  const { id, name, error } = useField(path);
  const errorId = error ? `${id}-error` : undefined;
  return (
    <fieldset id={id} tabIndex={-1} aria-describedby={errorId}>
      <legend className="font-bold">{legend}</legend>
      {choices.map(({ value, label, hint }) => (
        <CheckField
          key={value}
          name={name}
          value={value}
          label={label}
          hint={hint}
          defaultChecked={chosen.includes(value)}
        />
      ))}
      {error ? (
        <p id={errorId} className="text-sm font-bold text-signal">
          {error}
        </p>
      ) : null}
    </fieldset>
  );
}
