import { readdirSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { ESLint } from 'eslint';
import tseslint from 'typescript-eslint';
import { repo } from '@/scripts/house/repo.mjs';

// The snippets are no files, so the rules that need a whole program rest; the rules of the rooms need none.
const eslint = new ESLint({
  cwd: repo,
  overrideConfig: [
    { languageOptions: { parserOptions: { projectService: false, project: false } } },
    { rules: tseslint.configs.disableTypeChecked.rules },
  ],
});

const aboutRooms = /^(import-x\/no-restricted-paths|no-restricted-(imports|syntax|globals))$/;

/** What the rules of the rooms say about `code` as if it stood in `path` (below the repository): their names. */
export async function complaintsAbout(code: string, path: string): Promise<string[]> {
  const [result] = await eslint.lintText(code, { filePath: join(repo, path) });
  const messages = result?.messages ?? [];
  const broken = messages.find((message) => message.fatal);
  if (broken) throw new Error(`The snippet does not parse: ${broken.message}`);
  return messages.flatMap(({ ruleId }) => (ruleId && aboutRooms.test(ruleId) ? [ruleId] : []));
}

/**
 * The import text of some file that lies in `room`, a folder or a file below the repository; `butNot` leaves out a
 * folder in it. An import can only be judged when it leads to a real file. Throws when there is none.
 */
export function importOf(room: string, butNot?: string): string {
  if (statSync(join(repo, room)).isFile()) return `@/${room.replace(/\.tsx?$/, '')}`;
  const files = readdirSync(join(repo, room), { recursive: true, encoding: 'utf8' }).sort();
  const file = files.find((name) => /\.tsx?$/.test(name) && !(butNot && name.startsWith(butNot)));
  if (!file) throw new Error(`There is no source file in ${room}`);
  return `@/${room}/${file.replace(/\.tsx?$/, '')}`;
}
