'use client';

import { signOut } from 'next-auth/react';
import { routes } from '@/lib/routes';

/** Ends the session in this browser. */
export function SignOut() {
  return (
    <button
      type="button"
      className="min-h-11 px-2 underline hover:text-ink"
      onClick={() => void signOut({ callbackUrl: routes.signIn() })}
    >
      Sign out
    </button>
  );
}
