import type { ApiProblem } from '@client/lib/api'

/** What a refused sign-in or sign-up says above the form; null when the fields say it. */
export const problemWords = (problem: ApiProblem | null): string | null => {
  if (!problem) return null
  switch (problem.code) {
    case 'invalid':
      return problem.fields.length > 0 ? null : problem.message
    case 'sign-in-failed':
      return 'That e-mail and password do not go together. Look at both again: capitals count in a password.'
    case 'already-there':
      return 'There is an account with this e-mail already.'
    case 'offline':
      // Nothing of these forms is kept for later, so the usual words would promise too much.
      return 'The server cannot be reached. Try again in a moment.'
    default:
      return problem.message
  }
}
