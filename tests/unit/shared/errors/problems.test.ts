import { describe, expect, it } from 'vitest'
import { codeOfType, problem, ProblemBody, problems, problemType } from '@shared/errors/problems'

describe('problems', () => {
  it('have an error status, a title of their own and a type that leads back to the code (RFC 9457)', () => {
    const codes = Object.keys(problems) as (keyof typeof problems)[]
    expect(new Set(codes.map((code) => problems[code].title)).size).toBe(codes.length)
    for (const code of codes) {
      const { status } = problems[code]
      expect(status >= 400 && status < 600).toBe(true)
      expect(codeOfType(problemType(code))).toBe(code)
      const body = problem(code, { detail: 'Why.' }).toBody('request-1')
      expect(ProblemBody.parse(body)).toEqual({
        type: `/problems/${code}`,
        title: problems[code].title,
        status,
        detail: 'Why.',
        instance: 'request-1'
      })
    }
    expect([codeOfType('/problems/none'), codeOfType('about:blank'), codeOfType('/problems/toString')]).toEqual([
      null,
      null,
      null
    ])
  })
  it('keep their cause to themselves', () => {
    const body = problem('internal', { cause: new Error('the password is sesame') }).toBody()
    expect(JSON.stringify(body)).not.toContain('sesame')
  })
})
