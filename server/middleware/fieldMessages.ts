import type { z } from 'zod';
import type { FieldMessage } from '../errors';

/** Each thing a schema found, by path: `items.3.id`. */
export function fieldMessages(issues: readonly z.core.$ZodIssue[]): FieldMessage[] {
  return issues.flatMap((issue) => {
    const path = issue.path.map(String);
    if (issue.code !== 'unrecognized_keys') return [{ path: path.join('.'), message: issue.message }];
    return issue.keys.map((key) => ({ path: [...path, key].join('.'), message: issue.message }));
  });
}
