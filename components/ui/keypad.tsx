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
  label: string;
}

/** Digits on the page, for gloves: keys of 64 px. */
export function Keypad({ value, onChange, lengthMax, decimal = false, label }: KeypadProps) {
  const press = (key: string) => () => onChange(typeKey(value, key, lengthMax));
  return (
    <div role="group" aria-label={label} className="grid w-60 grid-cols-3 gap-2">
      {KEYS.map((key) => (
        <Button key={key} size="rig" onClick={press(key)}>
          <span className="figure text-2xl">{key}</span>
        </Button>
      ))}
      {decimal ? (
        <Button size="rig" onClick={press('.')} aria-label="decimal point">
          <span className="figure text-2xl">.</span>
        </Button>
      ) : (
        <span />
      )}
      <Button size="rig" onClick={press('0')}>
        <span className="figure text-2xl">0</span>
      </Button>
      <Button size="rig" onClick={press('back')} aria-label="delete the last digit">
        <span aria-hidden>⌫</span>
      </Button>
    </div>
  );
}
