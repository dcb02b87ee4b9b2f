import fc from 'fast-check';
import { z } from 'zod';
import { soundProfiles } from './profiles';

/** What of a JSON schema the protocol's schemas use. */
interface Shape {
  type?: string;
  const?: unknown;
  enum?: unknown[];
  format?: string;
  pattern?: string;
  minLength?: number;
  maxLength?: number;
  minimum?: number;
  maximum?: number;
  exclusiveMinimum?: number;
  items?: Shape;
  minItems?: number;
  maxItems?: number;
  properties?: Record<string, Shape>;
  required?: string[];
  additionalProperties?: Shape | boolean;
  anyOf?: Shape[];
  oneOf?: Shape[];
}

/** The shape that a message must have to be taken. */
export function shapeOf(schema: z.ZodType): Shape {
  return z.toJSONSchema(schema, { io: 'input' }) as Shape;
}

const optionsOf = ({ anyOf, oneOf }: Shape): Shape[] | undefined => anyOf ?? oneOf;

/** Rules between a profile's numbers stand in no JSON schema. */
const isProfile = ({ properties }: Shape): boolean => properties !== undefined && 'cutAxis' in properties;

function textOf({ format, pattern, minLength = 0, maxLength = 400 }: Shape): fc.Arbitrary<string> {
  if (format === 'uuid') return fc.uuid();
  if (format === 'date-time') {
    return fc.integer({ min: 0, max: 4_000_000_000 }).map((second) => new Date(second * 1000).toISOString());
  }
  if (pattern !== undefined) return fc.stringMatching(new RegExp(pattern));
  return fc.string({ minLength, maxLength: Math.min(maxLength, minLength + 40) });
}

function numberOf({ type, minimum, maximum, exclusiveMinimum }: Shape): fc.Arbitrary<number> {
  const min = Math.max(minimum ?? -1e6, -1e9);
  const max = Math.min(maximum ?? 1e6, 1e9);
  if (type === 'integer') return fc.integer({ min, max });
  if (exclusiveMinimum !== undefined)
    return fc.integer({ min: 1, max: 1e9 }).map((thousandths) => thousandths / 1000);
  return fc.double({ min, max, noNaN: true }).map((value) => value + 0);
}

function objectOf({ properties = {}, required = [], additionalProperties }: Shape): fc.Arbitrary<object> {
  if (typeof additionalProperties === 'object') {
    return fc.dictionary(fc.stringMatching(/^[A-Z_]{1,12}$/), valueOf(additionalProperties), { maxKeys: 3 });
  }
  const model = Object.fromEntries(Object.entries(properties).map(([name, shape]) => [name, valueOf(shape)]));
  return fc.record(model, { requiredKeys: required, noNullPrototype: true });
}

/** Any message of this shape. */
export function valueOf(shape: Shape): fc.Arbitrary<unknown> {
  const options = optionsOf(shape);
  if (options) return fc.oneof(...options.map(valueOf));
  if (shape.const !== undefined) return fc.constant(shape.const);
  if (shape.enum) return fc.constantFrom(...shape.enum);
  if (isProfile(shape)) return soundProfiles;
  switch (shape.type) {
    case 'string':
      return textOf(shape);
    case 'number':
    case 'integer':
      return numberOf(shape);
    case 'boolean':
      return fc.boolean();
    case 'null':
      return fc.constant(null);
    case 'array': {
      const { items = {}, minItems = 0 } = shape;
      return fc.array(valueOf(items), { minLength: minItems, maxLength: minItems + 2 });
    }
    case 'object':
      return objectOf(shape);
    default:
      throw new Error(`no such shape is known here: ${JSON.stringify(shape)}`);
  }
}

function isObject(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}

const wordsOf = ({ const: only, enum: words }: Shape): unknown[] =>
  words ?? (only === undefined ? [] : [only]);

/** Whether a value is of this one of several shapes. */
function fits(shape: Shape, value: unknown): boolean {
  const options = optionsOf(shape);
  if (options) return options.some((option) => fits(option, value));
  if (shape.type === 'null') return value === null;
  if (!isObject(value)) return shape.type !== 'object' && value !== null;
  return Object.entries(shape.properties ?? {}).every(
    ([name, { const: only, enum: words }]) =>
      (only === undefined || value[name] === only) && (!words || words.includes(value[name])),
  );
}

/** Puts further fields, made by `extras`, into every object of a message, at every level; dictionaries are left alone. */
export function withExtras(shape: Shape, value: unknown, extras: () => Record<string, unknown>): unknown {
  const options = optionsOf(shape);
  if (options) {
    const option = options.find((each) => fits(each, value));
    return option ? withExtras(option, value, extras) : value;
  }
  if (Array.isArray(value)) return value.map((item) => withExtras(shape.items ?? {}, item, extras));
  if (!isObject(value) || typeof shape.additionalProperties === 'object') return value;
  const { properties = {} } = shape;
  const known = Object.entries(value).map(([name, inner]) => [
    name,
    withExtras(properties[name] ?? {}, inner, extras),
  ]);
  const further = Object.entries(extras()).filter(([name]) => !Object.hasOwn(properties, name));
  // Own fields whatever their names: also one that is called `__proto__`.
  return Object.fromEntries([...further, ...known]) as unknown;
}

/** A place of a message at which one of several words says of which kind it is. */
export interface KindPlace {
  path: string;
  words: unknown[];
  /** The message with another word there. */
  withWord: (word: string) => unknown;
}

function kindName(options: Shape[]): string | undefined {
  return Object.keys(options[0]?.properties ?? {}).find((name) =>
    options.every(({ properties }) => wordsOf(properties?.[name] ?? {}).length > 0),
  );
}

/** Every place of this message that says of which kind it is. */
export function kindPlaces(shape: Shape, value: unknown, path: string[] = []): KindPlace[] {
  const options = optionsOf(shape);
  const name = options && kindName(options);
  const found: KindPlace[] = [];
  if (options && name !== undefined && isObject(value)) {
    const words = options.flatMap(({ properties }) => wordsOf(properties?.[name] ?? {}));
    found.push({ path: [...path, name].join('.'), words, withWord: (word) => ({ ...value, [name]: word }) });
  }
  const whole = options ? (options.find((option) => fits(option, value)) ?? {}) : shape;
  const inner = Array.isArray(value)
    ? value.map((item, index) => [String(index), item, whole.items ?? {}] as const)
    : Object.entries(isObject(value) ? value : {}).map(
        ([key, item]) => [key, item, whole.properties?.[key] ?? {}] as const,
      );
  for (const [key, item, itemShape] of inner) {
    for (const place of kindPlaces(itemShape, item, [...path, key])) {
      const put = (word: string): unknown =>
        Array.isArray(value)
          ? value.with(Number(key), place.withWord(word))
          : { ...(value as object), [key]: place.withWord(word) };
      found.push({ ...place, withWord: put });
    }
  }
  return found;
}
