import { useId, type ComponentProps, type ReactNode } from 'react';

const BOX =
  'w-full rounded-[2px] border border-ink bg-sheet px-3 text-ink aria-invalid:border-2 aria-invalid:border-signal';

interface Labels {
  label: string;
  hint?: ReactNode;
  error?: string;
}

/** The label above, the hint and the error beneath; both are read out with the control. */
function Labelled({ id, label, hint, error, children }: Labels & { id: string; children: ReactNode }) {
  return (
    <div className="grid content-start gap-1">
      <label htmlFor={id} className="font-bold">
        {label}
      </label>
      {children}
      {hint ? (
        <p id={`${id}-hint`} className="text-sm text-soft">
          {hint}
        </p>
      ) : null}
      {error ? (
        <p id={`${id}-error`} className="text-sm font-bold text-signal">
          {error}
        </p>
      ) : null}
    </div>
  );
}

function describedBy(id: string, { hint, error }: Labels): string | undefined {
  const ids = [hint ? `${id}-hint` : '', error ? `${id}-error` : ''].filter(Boolean);
  return ids.length > 0 ? ids.join(' ') : undefined;
}

/** A text, number, date or password input with its label. */
export function TextField({ label, hint, error, className = '', ...rest }: ComponentProps<'input'> & Labels) {
  const own = useId();
  const id = rest.id ?? own;
  return (
    <Labelled id={id} label={label} hint={hint} error={error}>
      <input
        {...rest}
        id={id}
        aria-invalid={error ? true : undefined}
        aria-describedby={describedBy(id, { label, hint, error })}
        className={`${BOX} min-h-11 ${className}`}
      />
    </Labelled>
  );
}

/** A longer text with its label. */
export function TextArea({
  label,
  hint,
  error,
  className = '',
  ...rest
}: ComponentProps<'textarea'> & Labels) {
  const own = useId();
  const id = rest.id ?? own;
  return (
    <Labelled id={id} label={label} hint={hint} error={error}>
      <textarea
        {...rest}
        id={id}
        aria-invalid={error ? true : undefined}
        aria-describedby={describedBy(id, { label, hint, error })}
        className={`${BOX} min-h-24 py-2 ${className}`}
      />
    </Labelled>
  );
}

/** A choice from a list with its label. */
export function SelectField({
  label,
  hint,
  error,
  className = '',
  children,
  ...rest
}: ComponentProps<'select'> & Labels) {
  const own = useId();
  const id = rest.id ?? own;
  return (
    <Labelled id={id} label={label} hint={hint} error={error}>
      <select
        {...rest}
        id={id}
        aria-invalid={error ? true : undefined}
        aria-describedby={describedBy(id, { label, hint, error })}
        className={`${BOX} min-h-11 ${className}`}
      >
        {children}
      </select>
    </Labelled>
  );
}

/** A tick box with its words beside it; the whole row is the target. */
export function CheckField({
  label,
  hint,
  ...rest
}: ComponentProps<'input'> & { label: ReactNode; hint?: ReactNode }) {
  return (
    <label className="flex min-h-11 items-center gap-3">
      <input {...rest} type="checkbox" className="size-6 shrink-0 accent-[var(--ink)]" />
      <span>
        {label}
        {hint ? <span className="block text-sm text-soft">{hint}</span> : null}
      </span>
    </label>
  );
}
