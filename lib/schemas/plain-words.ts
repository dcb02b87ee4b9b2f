import type { z } from 'zod';

type RawIssue = z.core.$ZodRawIssue;

/** Words for what a schema says nothing of its own about; for a person who looks at the field. */
export function plainWords(issue: RawIssue): string {
  switch (issue.code) {
    case 'invalid_type':
      return issue.expected === 'number' || issue.expected === 'int' ? 'Enter a number.' : 'Fill this in.';
    case 'too_small':
      return `${issue.inclusive === false ? 'More than' : 'At least'} ${issue.minimum}${unitOf(issue.origin)}.`;
    case 'too_big':
      return `${issue.inclusive === false ? 'Less than' : 'At most'} ${issue.maximum}${unitOf(issue.origin)}.`;
    case 'invalid_value':
    case 'invalid_union':
      return 'Pick one of the list.';
    case 'unrecognized_keys':
      return 'There is no such field.';
    default:
      return 'This is not written as it should be.';
  }
}

function unitOf(origin: string): string {
  return origin === 'string' ? ' characters' : '';
}
