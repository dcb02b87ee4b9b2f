import type { FieldProblem } from '@/lib/errors';
import { Notice } from './notice';

/** What a refused action answered: its title, its fields where they belong to no control, and the request's number. */
export function Problem({
  title,
  fields = [],
  requestId,
}: {
  title: string;
  fields?: FieldProblem[];
  requestId?: string;
}) {
  return (
    <Notice title={title} danger>
      {fields.length > 0 ? (
        <ul className="list-disc pl-5">
          {fields.map((field) => (
            <li key={`${field.path} ${field.message}`}>
              <span className="font-mono text-sm">{field.path}</span> {field.message}
            </li>
          ))}
        </ul>
      ) : null}
      {requestId ? <p className="font-mono text-sm text-soft">{requestId}</p> : null}
    </Notice>
  );
}
