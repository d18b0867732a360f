import type { z } from 'zod';
import type { LocaleResources } from './locale-resources.ts';

type Issue = Parameters<z.core.$ZodErrorMap>[0];
type Reason = keyof LocaleResources['errors']['fields'];

/** Why a field is refused, as `errors:fields` names it; undefined where the kind of the issue says enough. */
export function nameFieldIssue(issue: Issue): Reason | undefined {
  if (issue.code === 'invalid_type') {
    if (issue.input === null || issue.input === undefined) return 'required';
    return issue.expected === 'number' ? 'not-a-figure' : undefined;
  }
  if (issue.code === 'too_small') {
    if (issue.origin === 'string') return Number(issue.minimum) <= 1 ? 'required' : 'too-short';
    if (issue.origin !== 'number') return undefined;
    if (Number(issue.minimum) !== 0) return 'too-low';
    return issue.inclusive ? 'under-zero' : 'not-over-zero';
  }
  if (issue.code === 'invalid_format') return issue.input === '' ? 'required' : undefined;
  if (issue.code !== 'too_big') return undefined;
  if (issue.origin === 'string') return 'too-long';
  return issue.origin === 'number' ? 'too-high' : undefined;
}

/** For the resolver of a form: what its schema has no words of its own for is refused by what is wrong with it. */
export const fieldIssues = { error: nameFieldIssue };
