'use client';

import { createContext, useContext } from 'react';
import type { FieldProblem } from '@/lib/errors';

export interface FormState {
  /** Tells two forms of one page apart in the ids of their fields. */
  formId: string;
  busy: boolean;
  fields: FieldProblem[];
}

export const FormStateContext = createContext<FormState>({ formId: 'form', busy: false, fields: [] });

/** The id of the control that belongs to a path of the input. */
export function fieldId(formId: string, path: string): string {
  return `${formId}-${path}`;
}

/** The field that an error belongs to: one control holds a whole list, so `points.3` belongs to `points`. */
export function fieldPathOf(path: string): string {
  return path.replace(/(\.\d+)+$/, '');
}

/** Id, name and error of the field that carries `path`. */
export function useField(path: string): { id: string; name: string; error: string | undefined } {
  const { formId, fields } = useContext(FormStateContext);
  return {
    id: fieldId(formId, path),
    name: path,
    error: fields.find((field) => fieldPathOf(field.path) === path)?.message,
  };
}
