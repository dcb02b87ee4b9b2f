import fc from 'fast-check';

/** The run that the fuzz is about: tag 17, and what its rig may say of itself. */
export const TAG = 17;

const coordinate = (values: number[], decimals = 2) =>
  fc.constantFrom(...values).map((value) => value.toFixed(decimals));

/** Positions of this run, of others, of a rig that was reset, right and wrong in each number. */
const position = fc
  .record({
    X: coordinate([0, 1]),
    Y: coordinate([0, 170_000, 170_001, 170_002, 170_003, 180_001, 10_001, 17_000, 70_001]),
    Z: coordinate([8, 5.5, 10, 5.6]),
    E: coordinate([0, 100, 200, 199.9]),
    count: fc.constantFrom('', ' Count X:0 Y:0 Z:550', ' Count X:0 Y:0 Z:800', ' Count X:0 Y:0 Z:551'),
  })
  .map(({ X, Y, Z, E, count }) => `X:${X} Y:${Y} Z:${Z} E:${E}${count}`);

/** Numbers about the line in flight, which is the tenth, and some that are not. */
const lineNumber = fc.constantFrom(1, 9, 10, 11, 12, 13, 65_546, 4_294_967_306);

const numbered = fc
  .tuple(
    fc.constantFrom('ok N', 'ok ', 'Resend: ', 'Resend:', 'rs N', 'skip ', 'Error:expected line '),
    lineNumber,
  )
  .map(([word, line]) => `${word}${line}`);

const said = fc.constantFrom(
  'ok',
  'ok P15 B3',
  'ok T:19.37 /0.00 @:0',
  ' T:19.37 /0.00 @:0',
  'start',
  'Marlin 2.1.2',
  'wait',
  'echo:busy: processing',
  'busy:paused for user',
  'Error:checksum mismatch, Last Line: 9',
  'Error:Printer halted. kill() called!',
  'echo: cold extrusion prevented',
  'echo:Unknown command: "C1 Z0"',
  '//action:pause',
  '//action:filament_runout T0',
  'Reporting endstop status',
  'x_max: open',
  'x_max: TRIGGERED',
  'endstops hit: x_max:L filament:H',
  'FIRMWARE_NAME:Marlin 2.1.2 MACHINE_TYPE:rig',
  'Cap:EMERGENCY_PARSER:1',
  'fatal: level two - disabling all and resetting',
);

const LINE_ENDS = ['\n', '\r\n', '\r', ''];

const line = fc
  .tuple(
    fc.oneof(
      { weight: 4, arbitrary: position },
      { weight: 3, arbitrary: numbered },
      { weight: 5, arbitrary: said },
    ),
    fc.constantFrom(...LINE_ENDS, '\n', '\n', '\n'),
  )
  .map(([text, end]) => text + end);

/** One bit of one byte is another one, or bytes are missing at an end. */
const damaged = fc
  .tuple(line, fc.nat({ max: 79 }), fc.nat({ max: 7 }), fc.constantFrom('flip', 'cut', 'begin'))
  .map(([text, place, bit, what]) => {
    const at = text.length === 0 ? 0 : place % text.length;
    if (what === 'cut') return text.slice(0, at);
    if (what === 'begin') return text.slice(at);
    return text.slice(0, at) + String.fromCharCode(text.charCodeAt(at) ^ (1 << bit)) + text.slice(at + 1);
  });

/** Any bytes, one character each. */
export const bytes = fc
  .uint8Array({ maxLength: 24 })
  .map((values) => values.reduce((text, value) => text + String.fromCharCode(value), ''));

/** A board that never ends its line. */
const endless = fc.tuple(
  fc.constantFrom('x', ' ', 'X:1', 'ok ', '\u00ff', '9'),
  fc.integer({ min: 200, max: 700 }),
);

/** What may come over a serial line in one read: answers, damaged answers, halves of answers, anything. */
export const chunk: fc.Arbitrary<string> = fc.oneof(
  { weight: 8, arbitrary: line },
  { weight: 3, arbitrary: damaged },
  { weight: 2, arbitrary: bytes },
  { weight: 1, arbitrary: endless.map(([text, times]) => text.repeat(times)) },
);
