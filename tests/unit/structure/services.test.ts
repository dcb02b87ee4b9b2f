import { describe, expect, it } from 'vitest';
import { filesIn, functionsOf, valuesImportedFrom, type FunctionFacts } from '@/tests/unit/structure/source';

const AUTHORISING = ['authorise', 'authoriseAgent', 'authoriseSystem'];

/** Verbs that run before anybody is known, or tell what everybody may know. */
const BEFORE_ANYBODY = ['pairAgent', 'readHealth', 'readWorkshop', 'workshopIsEmpty'];

/** What callers outside of lib/services use of it without being a verb: who is there, the database, the claim of a job. */
const NO_VERBS = ['findSessionActor', 'openServices', 'withClaim', 'withTopicClaim'];

const functions = filesIn('lib/services', /\.ts$/).flatMap(functionsOf);
const verbs = functions.filter(({ isExported, takesContext }) => isExported && takesContext);

/** By itself, or through a function that it hands its context to. */
function isAuthorised(it: FunctionFacts, seen: FunctionFacts[] = []): boolean {
  if (AUTHORISING.some((name) => it.calls.has(name))) return true;
  const called = functions.filter(
    ({ name, path, isExported }) => it.calls.has(name) && (isExported || path === it.path),
  );
  return called.some((next) => !seen.includes(next) && isAuthorised(next, [...seen, it]));
}

describe('services', () => {
  it('authorise before they answer, but for the few that run before anybody is known', () => {
    const open = verbs.filter((verb) => !BEFORE_ANYBODY.includes(verb.name) && !isAuthorised(verb));
    expect(open.map(({ path, name }) => `${path} ${name}`)).toEqual([]);
  });

  it('tell their callers what they do', () => {
    const silent = verbs.filter(({ isExplained }) => !isExplained).map(({ path, name }) => `${path} ${name}`);
    expect(silent).toEqual([]);
  });

  it('stand one verb to a file', () => {
    const paths = verbs.map(({ path }) => path);
    expect(paths.filter((path, at) => paths.indexOf(path) !== at)).toEqual([]);
  });

  it('are entered from outside by a verb only, which takes who asks', () => {
    const callers = ['app', 'lib/jobs', 'lib/http', 'lib/auth'].flatMap((room) => filesIn(room, /\.tsx?$/));
    const names = new Set([...verbs.map(({ name }) => name), ...NO_VERBS]);
    const used = callers.flatMap((path) =>
      valuesImportedFrom(path, '@/lib/services/')
        .filter((name) => !names.has(name))
        .map((name) => `${path} ${name}`),
    );
    expect(used).toEqual([]);
  });

  it('are found by this test at all', () => {
    expect(verbs.length).toBeGreaterThan(30);
  });
});
