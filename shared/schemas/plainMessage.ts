import type { z } from 'zod';

/**
 * What to say of a field whose schema has no words of its own: what was seen and what is expected.
 * Given to zod as `error` wherever something from outside is read.
 */
export function plainMessage(issue: z.core.$ZodRawIssue): string {
  if (issue.code === 'invalid_type') {
    return issue.input === undefined ? 'is missing' : `expected ${issue.expected}, saw ${kindOf(issue.input)}`;
  }
  if (issue.code === 'too_big') return `at most ${issue.maximum} ${unitOf(issue.origin)}`.trim();
  if (issue.code === 'too_small') return `at least ${issue.minimum} ${unitOf(issue.origin)}`.trim();
  if (issue.code === 'invalid_value') return `expected one of ${issue.values.join(', ')}`;
  if (issue.code === 'invalid_format') return `not in the form of ${issue.format}`;
  if (issue.code === 'unrecognized_keys') return 'not known here';
  return 'could not be read';
}

const kindOf = (seen: unknown) => (seen === null ? 'null' : Array.isArray(seen) ? 'array' : typeof seen);
const unitOf = (origin: string) => ({ string: 'characters', array: 'items' })[origin] ?? '';
