import type { z } from 'zod'

type Issue = z.core.$ZodIssue

const UNIT: Readonly<Record<string, string>> = { string: ' characters', array: ' entries', set: ' entries' }

/** What is wrong, as the end of a sentence that begins with the field's name. */
function complaint(issue: Issue): string {
  switch (issue.code) {
    case 'too_small': return `needs at least ${issue.minimum}${UNIT[issue.origin] ?? ''}`
    case 'too_big': return `takes at most ${issue.maximum}${UNIT[issue.origin] ?? ''}`
    case 'invalid_type': return issue.input === undefined ? 'is missing' : `must be ${issue.expected === 'int' ? 'a whole number' : `of type ${issue.expected}`}`
    case 'invalid_value': return `must be ${issue.values.map(String).join(' or ')}`
    case 'unrecognized_keys': return `has what is not known here: ${issue.keys.join(', ')}`
    default: return issue.message
  }
}

/** Of a union's branches, the one that got furthest was meant. */
function meant(issue: Issue): { readonly issue: Issue, readonly path: readonly PropertyKey[] } {
  if (issue.code !== 'invalid_union') return { issue, path: issue.path }
  const branches = issue.errors.filter(each => each.length)
  const depth = (branch: readonly Issue[]) => branch[0]!.path.length
  const best = [...branches].sort((a, b) => depth(b) - depth(a) || a.length - b.length)[0]?.[0]
  if (!best) return { issue, path: issue.path }
  const inner = meant(best)
  return { issue: inner.issue, path: [...issue.path, ...inner.path] }
}

/** The first complaint of a schema, with the field it is about: "transactions.0.label". */
export function firstComplaint(error: z.ZodError): { readonly field: string, readonly message: string } {
  const { issue, path } = meant(error.issues[0]!)
  const field = path.map(String).join('.')
  return { field, message: `${field || 'The body'} ${complaint(issue)}.` }
}
