'use client';

import { useRouter } from 'next/navigation';
import { useId, useState, type FormEvent, type ReactNode } from 'react';
import { Button } from '@/components/ui/button';
import { ERRORS } from '@/lib/errors';
import type { ActionResult } from '@/lib/schemas/action-result';
import { FormProblem, labelled, type LabelledProblem } from './form-problem';
import { FormStateContext } from './form-state';

/** A server action, handed down by the page. */
export type SetupAction<Data = unknown> = (input: unknown) => Promise<ActionResult<Data>>;

interface Refusal {
  title: string;
  fields: LabelledProblem[];
  requestId?: string;
}

interface SetupFormProps<Data> {
  action: SetupAction<Data>;
  /** Makes the action's input of what the fields hold. */
  read: (form: FormData) => unknown;
  submit: string;
  /** Said when it was done. */
  done: string;
  /** Empties the form when it was done, for the next one. */
  clears?: boolean;
  look?: 'plain' | 'ink' | 'signal';
  /** Gets the answer and what was sent. */
  onDone?: (data: Data, form: FormData) => void;
  /** Whether the page stays and shows what has changed. */
  stays?: boolean;
  children?: ReactNode;
}

/** A form that asks a server action, keeps what was typed when it is refused, and shows what is wrong and where. */
export function SetupForm<Data>(props: SetupFormProps<Data>) {
  const { action, read, submit, done, clears = false, look = 'ink', onDone, stays = true, children } = props;
  const router = useRouter();
  const formId = useId();
  const [busy, setBusy] = useState(false);
  const [refusal, setRefusal] = useState<Refusal | null>(null);
  const [said, setSaid] = useState('');

  async function ask(form: HTMLFormElement) {
    setBusy(true);
    setRefusal(null);
    setSaid('');
    const typed = new FormData(form);
    const result = await action(read(typed)).catch(() => null);
    setBusy(false);
    if (!result) return setRefusal({ title: ERRORS['service-away'].title, fields: [] });
    if (!result.ok) return setRefusal({ ...result, fields: labelled(form, formId, result.fields) });
    setSaid(done);
    if (clears) form.reset();
    onDone?.(result.data, typed);
    if (stays) router.refresh();
  }

  function onSubmit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    if (!busy) void ask(event.currentTarget);
  }

  return (
    <FormStateContext value={{ formId, busy, fields: refusal?.fields ?? [] }}>
      {/* Sent before the page is alive, a form without a method would write its fields into the address. */}
      <form method="post" noValidate onSubmit={onSubmit} className="grid content-start gap-4">
        {refusal ? <FormProblem {...refusal} formId={formId} /> : null}
        {children}
        <div className="flex flex-wrap items-center gap-4">
          <Button type="submit" look={look} aria-disabled={busy}>
            {submit}
          </Button>
          <p role="status">{busy ? 'One moment …' : said}</p>
        </div>
      </form>
    </FormStateContext>
  );
}
