import { readFileSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import ts from 'typescript';
import { repo } from '@/scripts/house/repo.mjs';

const NOT_OURS = /(^|\/)(node_modules|\.git|\.next|\.data|dist-agent)(\/|$)/;

/** Paths below the repository of all files in `folder` whose path matches `pattern`, sorted. */
export function filesIn(folder: string, pattern: RegExp): string[] {
  return readdirSync(join(repo, folder), { withFileTypes: true })
    .map((entry) => ({ entry, path: join(folder, entry.name) }))
    .filter(({ path }) => !NOT_OURS.test(path))
    .flatMap(({ entry, path }) => (entry.isDirectory() ? filesIn(path, pattern) : [path]))
    .filter((path) => pattern.test(path))
    .sort();
}

/** The text of a file below the repository. */
export function textOf(path: string): string {
  return readFileSync(join(repo, path), 'utf8');
}

/** The syntax tree of a TypeScript file below the repository, with parents. */
export function treeOf(path: string): ts.SourceFile {
  return ts.createSourceFile(path, textOf(path), ts.ScriptTarget.ES2022, true);
}

export interface FunctionFacts {
  name: string;
  path: string;
  isExported: boolean;
  /** Whether it takes `{ ctx, … }`, as a service that anybody may call does. */
  takesContext: boolean;
  /** Whether a comment for its callers stands above it. */
  isExplained: boolean;
  /** Names of the functions it calls anywhere in its body. */
  calls: Set<string>;
}

/** The functions that a file declares at its top level. */
export function functionsOf(path: string): FunctionFacts[] {
  return treeOf(path)
    .statements.filter((statement) => ts.isFunctionDeclaration(statement))
    .map((declaration) => ({
      name: declaration.name?.text ?? 'default',
      path,
      isExported: declaration.modifiers?.some(({ kind }) => kind === ts.SyntaxKind.ExportKeyword) ?? false,
      takesContext: takesContext(declaration),
      isExplained: ts.getJSDocCommentsAndTags(declaration).length > 0,
      calls: callsIn(declaration),
    }));
}

function takesContext(declaration: ts.FunctionDeclaration): boolean {
  const pattern = declaration.parameters[0]?.name;
  if (!pattern || !ts.isObjectBindingPattern(pattern)) return false;
  return pattern.elements.some(({ name }) => ts.isIdentifier(name) && name.text === 'ctx');
}

function callsIn(node: ts.Node): Set<string> {
  const found = new Set<string>();
  const visit = (inner: ts.Node): void => {
    if (ts.isCallExpression(inner) && ts.isIdentifier(inner.expression)) found.add(inner.expression.text);
    ts.forEachChild(inner, visit);
  };
  visit(node);
  return found;
}

/** Names of values (not types) that a file imports from below `prefix`, for example `@/lib/services/`. */
export function valuesImportedFrom(path: string, prefix: string): string[] {
  return treeOf(path)
    .statements.filter((statement) => ts.isImportDeclaration(statement))
    .filter(
      ({ moduleSpecifier }) => ts.isStringLiteral(moduleSpecifier) && moduleSpecifier.text.startsWith(prefix),
    )
    .flatMap(({ importClause }) => {
      const bindings = importClause?.namedBindings;
      if (!importClause || importClause.isTypeOnly || !bindings || !ts.isNamedImports(bindings)) return [];
      return bindings.elements
        .filter(({ isTypeOnly }) => !isTypeOnly)
        .map((it) => (it.propertyName ?? it.name).text);
    });
}
