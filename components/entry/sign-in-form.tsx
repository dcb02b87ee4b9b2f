'use client';

import { useState, type FormEvent } from 'react';
import { Button } from '@/components/ui/button';
import { TextField } from '@/components/ui/field';
import { Problem } from '@/components/ui/problem';
import { trySignIn } from './sign-in';

/** E-mail and password. A whole new page follows, so that nothing of a former session is kept. */
export function SignInForm({ next }: { next: string }) {
  const [problem, setProblem] = useState<string | null>(null);
  const [busy, setBusy] = useState(false);

  async function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const form = new FormData(event.currentTarget);
    setBusy(true);
    setProblem(null);
    const refused = await trySignIn(String(form.get('email')), String(form.get('password')));
    if (refused === null) return window.location.assign(next);
    setBusy(false);
    setProblem(refused);
  }

  return (
    <form method="post" className="grid gap-4" onSubmit={(event) => void submit(event)}>
      {problem ? <Problem title={problem} /> : null}
      <TextField label="E-mail" name="email" type="email" autoComplete="username" required autoFocus />
      <TextField label="Password" name="password" type="password" autoComplete="current-password" required />
      <div>
        <Button type="submit" look="ink" disabled={busy}>
          Sign in
        </Button>
      </div>
    </form>
  );
}
