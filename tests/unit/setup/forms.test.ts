import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { fieldPathOf } from '@/components/setup/form/form-state';
import { linesOf, numberOf } from '@/components/setup/form/read';
import {
  CUT_AXIS_NUMBERS,
  FEED_NUMBERS,
  FITTED_FLAGS,
  HOLD_NUMBER,
} from '@/components/setup/rigs/profile-fields';
import { readProfile } from '@/components/setup/rigs/profile-form.read';
import { profileSchema, type Profile } from '@/lib/program/profile';
import { plainWords } from '@/lib/schemas/plain-words';
import { exampleRigProfile } from '@/tests/support/example-rig';

function formOf(fields: Record<string, string>): FormData {
  const form = new FormData();
  for (const [name, value] of Object.entries(fields)) form.append(name, value);
  return form;
}

function valueAt(profile: Profile, path: string): string {
  return String(
    path.split('.').reduce<unknown>((inner, key) => (inner as Record<string, unknown>)[key], profile),
  );
}

/** The fields of the profile form as a browser sends them. */
function sent(profile: Profile): FormData {
  const numbers = [...CUT_AXIS_NUMBERS, ...FEED_NUMBERS, HOLD_NUMBER].map(({ path }) => path);
  const texts = [...numbers, 'cutAxis.axis', 'cutAxis.homing', 'serial.baudRate'];
  const ticks = FITTED_FLAGS.filter(({ flag }) => profile.fitted[flag]).map(({ flag }) => `fitted.${flag}`);
  if (profile.serial.resetsOnOpen) ticks.push('serial.resetsOnOpen');
  if (profile.serial.unnumbered) ticks.push('serial.unnumbered');
  return formOf({
    ...Object.fromEntries(texts.map((path) => [`profile.${path}`, valueAt(profile, path)])),
    ...Object.fromEntries(ticks.map((path) => [`profile.${path}`, 'on'])),
    'profile.registerAxis': profile.registerAxis ?? '',
    'profile.fitted.guardSwitch.closedReads': profile.fitted.guardSwitch?.closedReads ?? '',
    'profile.fitted.guardSwitch.endstop': profile.fitted.guardSwitch?.endstop ?? '',
  });
}

describe('the profile form', () => {
  it('asks for every number of the schema and gives back what it showed', () => {
    const profile = exampleRigProfile();
    expect(profileSchema.parse(readProfile(sent(profile)))).toEqual(profile);
  });

  it('says "not fitted" of a guard switch, a register and flags that are not there', () => {
    const profile = exampleRigProfile();
    profile.registerAxis = null;
    profile.serial.resetsOnOpen = false;
    profile.fitted = { ...profile.fitted, guardSwitch: null, display: false, hardwareStop: false };
    expect(profileSchema.parse(readProfile(sent(profile)))).toEqual(profile);
  });
  it('asks for lines without numbers only when it is ticked; a profile of before has them', () => {
    const profile = exampleRigProfile();
    expect(profileSchema.parse(profile).serial.unnumbered).toBeUndefined();
    profile.serial.unnumbered = true;
    expect(profileSchema.parse(readProfile(sent(profile)))).toEqual(profile);
  });
});

describe('a number as typed', () => {
  it.each([
    ['0.8', 0.8],
    ['0,8', 0.8],
    [' 12 ', 12],
    ['−1.5', -1.5],
    ['-1.5', -1.5],
    ['', Number.NaN],
    ['1.000,5', Number.NaN],
    ['12 mm', Number.NaN],
  ])('%j is read as %d', (typed, expected) => {
    expect(numberOf(formOf({ n: typed }), 'n')).toBe(expected);
  });

  it('is none when there is no such field', () => {
    expect(numberOf(formOf({}), 'n')).toBeNaN();
  });
});

describe('lines as typed', () => {
  it('are those that hold something', () => {
    expect(linesOf(formOf({ points: ' one \n\n\r\n two' }), 'points')).toEqual(['one', 'two']);
  });
});

describe('an error', () => {
  it('belongs to the control that holds the whole list', () => {
    expect(['points', 'points.3', 'cutAxis.homeMm'].map(fieldPathOf)).toEqual([
      'points',
      'points',
      'cutAxis.homeMm',
    ]);
  });

  it.each([
    [z.number(), Number.NaN, 'Enter a number.'],
    [z.number(), undefined, 'Enter a number.'],
    [z.string(), undefined, 'Fill this in.'],
    [z.number().positive(), 0, 'More than 0.'],
    [z.number().min(1), 0, 'At least 1.'],
    [z.number().max(150), 151, 'At most 150.'],
    [z.string().max(2), 'abc', 'At most 2 characters.'],
    [z.enum(['a']), 'b', 'Pick one of the list.'],
    [z.union([z.literal(1), z.literal(2)]), 3, 'Pick one of the list.'],
    [z.string().regex(/a/), 'b', 'This is not written as it should be.'],
    [z.number('Own words.'), Number.NaN, 'Own words.'],
  ])('says in plain words what a schema says nothing of: case %#', (schema, input, words) => {
    const parsed = schema.safeParse(input, { error: plainWords });
    expect(parsed.error?.issues[0]?.message).toBe(words);
  });
});
