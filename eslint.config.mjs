import { fileURLToPath } from 'node:url';
import { createTypeScriptImportResolver } from 'eslint-import-resolver-typescript';
import importX from 'eslint-plugin-import-x';
import reactHooks from 'eslint-plugin-react-hooks';
import { defineConfig } from 'eslint/config';
import tseslint from 'typescript-eslint';
import { rooms } from './scripts/lint/rooms.mjs';
import { noEnvironment, rulesOf } from './scripts/lint/rules.mjs';

const base = fileURLToPath(new URL('.', import.meta.url));

export default defineConfig(
  { ignores: ['node_modules/', '.next/', '.data/', 'dist-agent/', 'next-env.d.ts', 'public/'] },
  // A rule is never switched off from inside a file.
  { linterOptions: { noInlineConfig: true, reportUnusedDisableDirectives: 'error' } },
  ...tseslint.configs.recommended,
  {
    languageOptions: { parserOptions: { projectService: true, tsconfigRootDir: base } },
    plugins: { 'import-x': importX },
    settings: {
      'import-x/resolver-next': [createTypeScriptImportResolver({ project: `${base}tsconfig.json` })],
    },
    rules: {
      '@typescript-eslint/await-thenable': 'error',
      '@typescript-eslint/consistent-type-imports': ['error', { fixStyle: 'inline-type-imports' }],
      '@typescript-eslint/no-floating-promises': 'error',
      '@typescript-eslint/no-misused-promises': ['error', { checksVoidReturn: { attributes: false } }],
      '@typescript-eslint/no-non-null-assertion': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      '@typescript-eslint/only-throw-error': 'error',
      '@typescript-eslint/return-await': ['error', 'in-try-catch'],
      '@typescript-eslint/switch-exhaustiveness-check': [
        'error',
        { considerDefaultExhaustiveForUnions: true },
      ],
      'import-x/no-cycle': ['error', { ignoreExternal: true }],
      eqeqeq: 'error',
      'max-lines': ['error', { max: 300 }],
      'no-console': 'off',
      'no-empty': ['error', { allowEmptyCatch: false }],
      'no-restricted-syntax': ['error', ...noEnvironment],
    },
  },
  {
    files: ['app/**/*.tsx', 'components/**/*.{ts,tsx}'],
    ...reactHooks.configs.flat.recommended,
  },
  { ignores: ['tests/**'], rules: { 'max-lines-per-function': ['error', { max: 120 }] } },
  ...rooms.map((room) => ({ files: room.files, ignores: room.butNot ?? [], rules: rulesOf(room, base) })),
  {
    // These read settings of their own; the room's other bans hold as they are.
    files: ['scripts/**', 'tests/support/**', '*.config.{mjs,ts}'],
    rules: { 'no-restricted-syntax': 'off' },
  },
);
