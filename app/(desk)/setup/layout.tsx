import type { Metadata } from 'next';
import type { ReactNode } from 'react';
import { SetupNav } from '@/components/setup/setup-nav';

export const metadata: Metadata = { title: { default: 'Set-up', template: '%s · Set-up · Ellwand' } };

export default function SetupLayout({ children }: { children: ReactNode }) {
  return (
    <>
      <SetupNav />
      {children}
    </>
  );
}
