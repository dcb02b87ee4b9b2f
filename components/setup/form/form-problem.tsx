'use client';

import { useEffect, useRef } from 'react';
import { Notice } from '@/components/ui/notice';
import type { FieldProblem } from '@/lib/errors';
import { fieldId, fieldPathOf } from './form-state';

export interface LabelledProblem extends FieldProblem {
  /** What the field is called on the page; empty when the form has no such field. */
  label: string;
}

/** The problems with the names that their fields bear in this form. */
export function labelled(form: HTMLFormElement, formId: string, fields: FieldProblem[]): LabelledProblem[] {
  return fields.map((field) => {
    const id = fieldId(formId, fieldPathOf(field.path));
    const label = [...form.querySelectorAll('label')].find((candidate) => candidate.htmlFor === id);
    const legend = form.querySelector(`fieldset[id="${CSS.escape(id)}"] > legend`);
    return { ...field, label: (label ?? legend)?.textContent ?? '' };
  });
}

interface FormProblemProps {
  title: string;
  fields: LabelledProblem[];
  requestId?: string;
  formId: string;
}

/** The summary of a refusal: it takes the focus, and each of its lines leads to its field. */
export function FormProblem({ title, fields, requestId, formId }: FormProblemProps) {
  const place = useRef<HTMLDivElement>(null);
  useEffect(() => place.current?.focus(), []);
  return (
    <div ref={place} tabIndex={-1}>
      <Notice title={title} danger>
        <ul>
          {fields.map(({ path, message, label }) => (
            <li key={`${path} ${message}`}>
              {label ? (
                <a href={`#${fieldId(formId, fieldPathOf(path))}`} className="underline">
                  {label}
                </a>
              ) : null}{' '}
              {message}
            </li>
          ))}
        </ul>
        {requestId ? <p className="text-sm text-soft">Number {requestId}</p> : null}
      </Notice>
    </div>
  );
}
