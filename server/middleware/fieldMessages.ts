import type { z } from 'zod';
import type { FieldMessage } from '../errors';

/** An answer must not grow with what somebody sends. */
const MOST_FIELDS = 20;
const LONGEST_PATH = 200;

/** The first things a schema found, by path: `items.3.id`. */
export function fieldMessages(issues: readonly z.core.$ZodIssue[]): FieldMessage[] {
  const messages = issues.slice(0, MOST_FIELDS).flatMap((issue) => {
    const path = issue.path.map(String);
    if (issue.code !== 'unrecognized_keys') return [{ path: path.join('.'), message: issue.message }];
    return issue.keys.map((key) => ({ path: [...path, key].join('.'), message: issue.message }));
  });
  return messages.slice(0, MOST_FIELDS).map((each) => ({ ...each, path: each.path.slice(0, LONGEST_PATH) }));
}
