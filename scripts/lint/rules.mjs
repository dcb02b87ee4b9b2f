/** Turns one room of rooms.mjs into the rules that keep it. */

/** @typedef {import('./rooms.mjs').Room} Room */
/** @typedef {{selector: string, message: string}} Banned */

const CLOCK = [
  { selector: "NewExpression[callee.name='Date'][arguments.length=0]", message: 'Time is handed in.' },
  {
    selector: "CallExpression[callee.object.name='Date'][callee.property.name='now']",
    message: 'Time is handed in.',
  },
  {
    selector: "MemberExpression[object.name='Date'][property.name='now']",
    message: 'Time is handed in.',
  },
  { selector: "CallExpression[callee.name='Date']", message: 'Time is handed in.' },
  {
    selector: "MemberExpression[object.name='performance'][property.name='now']",
    message: 'Time is handed in.',
  },
  {
    selector: "MemberExpression[object.name='Math'][property.name='random']",
    message: 'Randomness is handed in.',
  },
];

const ENVIRONMENT = [
  {
    selector: "MemberExpression[object.name='process'][property.name='env']",
    message: 'The environment is parsed once, in lib/env.',
  },
  {
    selector: "VariableDeclarator[init.name='process'] > ObjectPattern > Property[key.name='env']",
    message: 'The environment is parsed once, in lib/env.',
  },
  {
    selector:
      ':matches(ImportDeclaration, ExportNamedDeclaration, ImportExpression)[source.value=/^(node:)?process$/]',
    message: 'The environment is parsed once, in lib/env.',
  },
];

const STILL = [
  'process',
  'Buffer',
  'console',
  'fetch',
  'setTimeout',
  'setInterval',
  'setImmediate',
  'performance',
  'crypto',
  'window',
  'document',
  'navigator',
  'localStorage',
];

/**
 * What the code outside lib/env (and the few places that read their own settings) must not write.
 * @type {Banned[]}
 */
export const noEnvironment = ENVIRONMENT;

/** @param {RegExp} pattern @returns {string} its source, fit for a selector's regular expression */
function inSelector(pattern) {
  return pattern.source.replaceAll(/(?<!\\)\//g, '\\/');
}

/** @param {Room} room @returns {RegExp[]} patterns of import texts that this room must not use */
function forbiddenImports(room) {
  if (room.onlyPackages) {
    return [new RegExp(`^(?!@\\/|\\.{1,2}\\/|${room.onlyPackages.source.slice(1)}).*$`)];
  }
  return room.noPackages ?? [];
}

/** @param {Room} room @param {string} base the repository's folder @returns {import('eslint').Linter.RulesRecord} */
export function rulesOf(room, base) {
  const forbidden = forbiddenImports(room);
  const message = `${room.name} may not know this package.`;
  return {
    'import-x/no-restricted-paths': [
      'error',
      {
        basePath: base,
        zones: [
          {
            target: '.',
            from: '.',
            except: ['./node_modules', ...room.own, ...room.knows],
            message: `${room.name} may not know it: see design, rooms.`,
          },
        ],
      },
    ],
    'no-restricted-imports': [
      'error',
      { patterns: forbidden.map((pattern) => ({ regex: pattern.source, message })) },
    ],
    'no-restricted-syntax': [
      'error',
      ...forbidden.map((pattern) => ({
        selector: `ImportExpression[source.value=/${inSelector(pattern)}/]`,
        message,
      })),
      ...(room.timeless ? CLOCK : []),
      ...(room.readsEnvironment ? [] : ENVIRONMENT),
    ],
    'no-restricted-globals': ['error', ...(room.still ? STILL : [])],
  };
}
