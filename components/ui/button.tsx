import Link from 'next/link';
import type { ComponentProps } from 'react';

type Look = 'plain' | 'ink' | 'dashed' | 'signal';
type Size = 'desk' | 'rig';

const LOOKS: Record<Look, string> = {
  plain: 'border border-ink bg-sheet text-ink hover:bg-linen',
  ink: 'border border-ink bg-ink text-sheet hover:opacity-90',
  dashed: 'border border-dashed border-ink bg-sheet text-soft',
  signal: 'border-2 border-signal bg-sheet text-signal hover:bg-linen',
};

/** 44 px at a desk, 64 px at a rig, where gloves are worn. */
const SIZES: Record<Size, string> = {
  desk: 'min-h-11 min-w-11 px-4 text-base',
  rig: 'min-h-16 min-w-16 px-6 text-lg',
};

function classesOf(look: Look, size: Size, extra = ''): string {
  return `inline-flex items-center justify-center gap-2 rounded-[2px] font-bold disabled:cursor-not-allowed disabled:opacity-45 ${LOOKS[look]} ${SIZES[size]} ${extra}`;
}

interface Looks {
  look?: Look;
  size?: Size;
}

/** A button; `size="rig"` wherever it is pressed at a rig. */
export function Button({
  look = 'plain',
  size = 'desk',
  className,
  type = 'button',
  ...rest
}: ComponentProps<'button'> & Looks) {
  return <button type={type} className={classesOf(look, size, className)} {...rest} />;
}

/** A link that looks like a button. */
export function LinkButton({
  look = 'plain',
  size = 'desk',
  className,
  ...rest
}: ComponentProps<typeof Link> & Looks) {
  return <Link className={classesOf(look, size, className)} {...rest} />;
}
