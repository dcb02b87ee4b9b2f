'use client';

import { Button } from '@/components/ui/button';

/** Opens the browser's print window. */
export function PrintButton() {
  return (
    <Button look="ink" size="rig" onClick={() => window.print()}>
      Print the label
    </Button>
  );
}
