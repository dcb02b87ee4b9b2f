import { isTicked, numberOf, textOf } from '../form/read';
import { CUT_AXIS_NUMBERS, FEED_NUMBERS, FITTED_FLAGS, HOLD_NUMBER } from './profile-fields';

type Nested = { [key: string]: unknown };

/** Puts a value at `a.b.c` of an object, making what is missing on the way. */
function put(target: Nested, path: string, value: unknown): void {
  const [key = '', ...rest] = path.split('.');
  if (rest.length === 0) {
    target[key] = value;
    return;
  }
  const inner = (target[key] ??= {}) as Nested;
  put(inner, rest.join('.'), value);
}

/**
 * What the profile form holds as a profile, for the schema to judge. Names of fields are paths below `profile.`, so
 * that the schema's complaints find their fields.
 */
export function readProfile(form: FormData): unknown {
  const profile: Nested = {};
  for (const { path } of [...CUT_AXIS_NUMBERS, ...FEED_NUMBERS, HOLD_NUMBER]) {
    put(profile, path, numberOf(form, `profile.${path}`));
  }
  put(profile, 'cutAxis.axis', textOf(form, 'profile.cutAxis.axis'));
  put(profile, 'cutAxis.homing', textOf(form, 'profile.cutAxis.homing'));
  put(profile, 'registerAxis', textOf(form, 'profile.registerAxis') || null);
  for (const { flag } of FITTED_FLAGS) {
    put(profile, `fitted.${flag}`, isTicked(form, `profile.fitted.${flag}`));
  }
  put(profile, 'fitted.guardSwitch', readGuardSwitch(form));
  put(profile, 'serial.baudRate', Number(textOf(form, 'profile.serial.baudRate')));
  put(profile, 'serial.resetsOnOpen', isTicked(form, 'profile.serial.resetsOnOpen'));
  if (isTicked(form, 'profile.serial.unnumbered')) put(profile, 'serial.unnumbered', true);
  return profile;
}

function readGuardSwitch(form: FormData): unknown {
  const closedReads = textOf(form, 'profile.fitted.guardSwitch.closedReads');
  if (closedReads === '') return null;
  return { endstop: textOf(form, 'profile.fitted.guardSwitch.endstop').trim(), closedReads };
}
