import NextAuth from 'next-auth';
import type { NextRequest } from 'next/server';
import { authOptions } from '@/lib/auth/options';

interface Context {
  params: Promise<{ nextauth: string[] }>;
}

/** next-auth's own routes: its token against forged forms, signing in, signing out, whose session it is. */
function handler(request: NextRequest, context: Context): Promise<Response> {
  return NextAuth(request, context, authOptions()) as Promise<Response>;
}

export { handler as GET, handler as POST };
