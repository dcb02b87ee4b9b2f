'use client';

import { useEffect, useRef } from 'react';
import { Notice } from '@/components/ui/notice';
import type { FieldProblem } from '@/lib/errors';
import { fieldId, fieldPathOf } from './form-state';

/** The summary of a refusal: it takes the focus, and each of its lines leads to its field. */
export function FormProblem({
  title,
  fields,
  requestId,
  formId,
}: {
  title: string;
  fields: FieldProblem[];
  requestId?: string;
  formId: string;
}) {
  const place = useRef<HTMLDivElement>(null);
  useEffect(() => place.current?.focus(), []);
  return (
    <div ref={place} tabIndex={-1}>
      <Notice title={title} danger>
        <ul>
          {fields.map(({ path, message }) => (
            <li key={`${path} ${message}`}>
              <a href={`#${fieldId(formId, fieldPathOf(path))}`} className="underline">
                {message}
              </a>
            </li>
          ))}
        </ul>
        {requestId ? <p className="text-sm text-soft">Number {requestId}</p> : null}
      </Notice>
    </div>
  );
}
