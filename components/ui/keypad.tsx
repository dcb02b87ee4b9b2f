'use client';

import { Button } from './button';

const KEYS = ['1', '2', '3', '4', '5', '6', '7', '8', '9'] as const;

/** Applies one key to what is typed so far; a decimal point only once, `back` takes the last character. */
export function typeKey(typed: string, key: string, lengthMax: number): string {
  if (key === 'back') return typed.slice(0, -1);
  if (key === '.' && typed.includes('.')) return typed;
  return typed.length >= lengthMax ? typed : typed + key;
}

interface KeypadProps {
  value: string;
  onChange: (value: string) => void;
  lengthMax: number;
  decimal?: boolean;
  /** One row across the page instead of a block of three columns. */
  row?: boolean;
  label: string;
}

function Key({ name, label, onPress }: { name: string; label?: string; onPress: () => void }) {
  return (
    <Button size="rig" className="px-0" onClick={onPress} aria-label={label}>
      <span aria-hidden={label ? true : undefined} className="figure text-2xl">
        {name}
      </span>
    </Button>
  );
}

/** Digits on the page, for gloves: keys of 64 px and more. */
export function Keypad({ value, onChange, lengthMax, decimal = false, row = false, label }: KeypadProps) {
  const press = (key: string) => () => onChange(typeKey(value, key, lengthMax));
  const shape = row ? 'w-full grid-cols-[repeat(auto-fit,minmax(64px,1fr))]' : 'w-60 grid-cols-3';
  return (
    <div role="group" aria-label={label} className={`grid gap-2 ${shape}`}>
      {KEYS.map((key) => (
        <Key key={key} name={key} onPress={press(key)} />
      ))}
      {decimal ? <Key name="." label="decimal point" onPress={press('.')} /> : null}
      {!decimal && !row ? <span /> : null}
      <Key name="0" onPress={press('0')} />
      <Key name="⌫" label="delete the last digit" onPress={press('back')} />
    </div>
  );
}
