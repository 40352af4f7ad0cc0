import { describe, expect, it } from 'vitest'
import { ApiProblem } from '../../../../src/api/http'
import { refusedFields } from '../../../../src/components/renterForm/problemWords'
import { fieldsOf, formSteps, stepOf } from '../../../../src/components/renterForm/formSteps'
import { formFields } from '#shared/renters/formRules'

describe('what the server refuses of a form', () => {
  it('stands at the field that it is about, with the reason that the field has words for', () => {
    const problem = new ApiProblem(422, 'renters.unfinished', {
      fields: ['guardianName:minor', 'endsOn:too_long'],
    })
    expect(refusedFields(problem)).toEqual([
      { field: 'guardianName', reason: 'minor' },
      { field: 'endsOn', reason: 'too_long' },
    ])
  })

  it('finds the field of something that is not well formed, from the phone and from the desk', () => {
    const issues = [
      { path: ['body', 'mass', 'value'], reason: 'too_big' },
      { path: ['body', 'form', 'guardian', 'relation'], reason: 'invalid_value' },
    ]
    expect(refusedFields(new ApiProblem(400, 'request.malformed', {}, issues))).toEqual([
      { field: 'mass', reason: 'refused' },
      { field: 'guardianRelation', reason: 'refused' },
    ])
  })

  it('names no field where the refusal is about something else', () => {
    expect(refusedFields(new ApiProblem(404, 'links.unknown'))).toEqual([])
    expect(
      refusedFields(new ApiProblem(400, 'request.malformed', {}, [{ path: ['id'], reason: 'x' }])),
    ).toEqual([])
  })
})

describe('the steps of the form', () => {
  it('ask for every field exactly once', () => {
    const asked = formSteps.flatMap((step) => fieldsOf[step])
    expect([...asked].sort()).toEqual([...formFields].sort())
    expect(stepOf('shoe')).toBe('boots')
  })
})
