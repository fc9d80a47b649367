import { z } from 'zod'

/**
 * Plain words for what zod finds, set once on both sides, so that "Invalid input: expected string, received undefined"
 * never reaches a person. A message given in the schema wins.
 */
function plainMessage(issue: z.core.$ZodRawIssue): string | undefined {
  switch (issue.code) {
    case 'invalid_type':
      if (issue.input === undefined) return 'Fill this in.'
      if (issue.expected === 'number' || issue.expected === 'int') return 'Write a number.'
      if (issue.expected === 'string') return 'Write some text.'
      return `This should be ${article(issue.expected)}.`
    case 'too_small':
      if (issue.origin === 'string')
        return issue.minimum === 1 ? 'Fill this in.' : `Use at least ${issue.minimum} characters.`
      if (issue.origin === 'array') return `Give at least ${issue.minimum}.`
      return `${issue.inclusive ? 'No less than' : 'More than'} ${issue.minimum}.`
    case 'too_big':
      if (issue.origin === 'string') return `Keep it to ${issue.maximum} characters.`
      if (issue.origin === 'array') return `No more than ${issue.maximum}.`
      return `${issue.inclusive ? 'No more than' : 'Less than'} ${issue.maximum}.`
    case 'invalid_value':
      return `Choose one of: ${issue.values.map(String).join(', ')}.`
    case 'unrecognized_keys':
      return `There is no field called ${issue.keys.join(', ')}.`
    case 'not_multiple_of':
      return `Use steps of ${issue.divisor}.`
    case 'invalid_format':
      return issue.format === 'date'
        ? 'Write a day like 2031-04-05.'
        : 'That is not written in the right form.'
    default:
      return undefined
  }
}

const article = (word: string) => (/^[aeiou]/.test(word) ? `an ${word}` : `a ${word}`)

/** Call once at start, in the server and in the client. */
export const speakPlainly = () => z.config({ customError: plainMessage })
