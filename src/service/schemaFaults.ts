import { type z } from 'zod'
import { type Fault } from './problems.ts'

type Issue = z.core.$ZodIssue

/** Says in plain words what a value that a schema refused must be; `part` is where it came from. */
export function schemaFaults(error: z.core.$ZodError, part = 'body'): Fault[] {
  const prefix = part === 'querystring' ? '?' : '/'
  return error.issues.flatMap((issue) => faultsOf(issue, [], prefix))
}

function faultsOf(issue: Issue, parents: readonly PropertyKey[], prefix: string): Fault[] {
  const path = [...parents, ...issue.path]
  if (issue.code === 'unrecognized_keys') {
    return issue.keys.map((key) => ({
      path: pointer([...path, key], prefix),
      message: 'is no member known here',
    }))
  }
  if (issue.code === 'invalid_union' && issue.errors.length > 0) {
    // The alternative that came closest is the one that was meant.
    const [closest] = issue.errors.toSorted((a, b) => misses(a) - misses(b))
    return closest.flatMap((inner) => faultsOf(inner, path, prefix))
  }
  return [{ path: pointer(path, prefix), message: message(issue) }]
}

function misses(issues: readonly Issue[]): number {
  return issues.reduce(
    (sum, issue) => sum + (issue.code === 'unrecognized_keys' ? 2 * issue.keys.length : 1),
    0,
  )
}

function message(issue: Issue): string {
  const given = 'input' in issue ? `, is ${shown(issue.input)}` : ''
  switch (issue.code) {
    case 'invalid_type':
      return issue.input === undefined
        ? `is missing: ${kind(issue.expected)}`
        : kind(issue.expected) + given
    case 'too_small':
      return `must be ${issue.inclusive === false ? 'above' : 'at least'} ${String(issue.minimum)}${lengthOf(issue)}${given}`
    case 'too_big':
      return `must be ${issue.inclusive === false ? 'below' : 'at most'} ${String(issue.maximum)}${lengthOf(issue)}${given}`
    case 'invalid_value':
      return `must be ${issue.values.map((value) => JSON.stringify(value)).join(' or ')}${given}`
    case 'invalid_union':
      return 'options' in issue
        ? `must be ${issue.options.map((option) => JSON.stringify(option)).join(' or ')}`
        : 'fits none of the forms known here'
    default:
      return issue.message
  }
}

function kind(expected: string): string {
  const articles: Record<string, string> = {
    object: 'an object',
    array: 'a list',
    int: 'a whole number',
  }
  return `must be ${articles[expected] ?? `a ${expected}`}`
}

function lengthOf(issue: { origin: string }): string {
  if (issue.origin === 'string') return ' characters long'
  return issue.origin === 'array' ? ' long' : ''
}

function shown(value: unknown): string {
  if (typeof value === 'number') return String(value)
  const text = JSON.stringify(value) as string | undefined
  if (text === undefined) return 'nothing'
  return text.length > 60 ? `${text.slice(0, 60)}…` : text
}

/** JSON pointer (RFC 6901) of a path. */
function pointer(path: readonly PropertyKey[], prefix: string): string {
  if (path.length === 0) return ''
  return (
    prefix + path.map((part) => String(part).replaceAll('~', '~0').replaceAll('/', '~1')).join('/')
  )
}
