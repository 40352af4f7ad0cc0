import { describe, expect, it } from 'vitest'
import { draftFrom, emptyDraft, readDraft, type FormDraft } from '#shared/renters/draft'
import { isLight } from '#shared/release/isLight'
import { ageForTable, formProblems } from '#shared/renters/formRules'
import { renterForm } from '#shared/schemas/renters'

const facts = { today: '2027-02-14', ageOfMajority: 18 }
/** An invented renter's draft that lacks nothing. */
const full: FormDraft = {
  ...emptyDraft,
  firstName: ' Orla ',
  lastName: 'Fenn',
  phone: '+43 000 288',
  birthDate: '1988-06-30',
  mass: '70,5',
  height: '175',
  skierType: 'II',
  boots: 'hire',
  shoe: '42',
  startsOn: '2027-02-14',
  endsOn: '2027-02-16',
}
const read = (changes: Partial<FormDraft> = {}) => readDraft({ ...full, ...changes }, 'en', facts)
const slips = (changes: Partial<FormDraft>) => {
  const result = read(changes)
  return result.ok ? [] : result.problems.map(({ field, reason }) => `${field}:${reason}`)
}

describe('a draft that lacks nothing', () => {
  it('is a form that the server takes, with what was typed in the unit that was typed', () => {
    const result = read()
    expect(result).toMatchObject({
      ok: true,
      form: {
        firstName: 'Orla',
        mass: { unit: 'kg', value: 70.5 },
        height: { unit: 'cm', value: 175 },
        birthDate: '1988-06-30',
        age: null,
        shoe: { size: '42', system: 'eu' },
        guardian: null,
      },
    })
    expect(result.ok && renterForm.parse(result.form)).toEqual(result.ok && result.form)
  })

  it('may be in stone and pounds, feet and inches, with a comma, an age and a foot length', () => {
    const result = read({
      massUnit: 'st-lb',
      stone: '11',
      pounds: '3,5',
      heightUnit: 'ft-in',
      feet: '5',
      inches: '9',
      bornBy: 'age',
      age: '34',
      shoeSystem: 'foot',
      shoe: '26,5',
    })
    expect(result.ok && result.form).toMatchObject({
      mass: { unit: 'st-lb', stone: 11, pounds: 3.5 },
      height: { unit: 'ft-in', feet: 5, inches: 9 },
      birthDate: null,
      age: 34,
      shoe: { footMm: 265 },
    })
  })

  it('needs no shoe size for own boots, and none for rented ones: the foot is measured', () => {
    expect(read({ boots: 'own', shoe: 'abc' })).toMatchObject({
      ok: true,
      form: { ownBoots: true, shoe: null },
    })
    expect(read({ shoe: '' })).toMatchObject({ ok: true, form: { shoe: null } })
  })
})

describe('a draft that lacks something', () => {
  it('says everything at once, in the order of the fields', () => {
    expect(slips(emptyDraft)).toEqual([
      'firstName:empty',
      'lastName:empty',
      'birthDate:empty',
      'phone:nobody_reachable',
      'mass:empty',
      'height:empty',
      'skierType:empty',
      'ownBoots:empty',
      'startsOn:empty',
      'endsOn:empty',
    ])
  })

  it('says one thing for one slip', () => {
    const cases: [Partial<FormDraft>, string[]][] = [
      [{ mass: '1000' }, ['mass:out_of_limits']],
      [{ mass: '70 kg' }, ['mass:not_a_number']],
      [{ height: '1,75' }, ['height:looks_like_metres']],
      [{ birthDate: '2027-02-30' }, ['birthDate:not_a_day']],
      [{ birthDate: '2027-02-15' }, ['birthDate:ahead']],
      [{ bornBy: 'age', age: '7,5' }, ['age:not_whole']],
      [{ bornBy: 'age', age: '121' }, ['age:out_of_limits']],
      [{ phone: '' }, ['phone:nobody_reachable']],
      [{ phone: '', email: 'orla@' }, ['email:no_address']],
      [{ phone: '', email: 'orla@renter.test' }, []],
      [{ endsOn: '2027-02-13' }, ['endsOn:before_first_day']],
      [{ startsOn: '2027-02-13' }, ['startsOn:past']],
      [{ shoe: '60' }, ['shoe:out_of_limits']],
      [{ shoeSystem: 'uk', shoe: '9,5' }, []],
    ]
    for (const [changes, expected] of cases) expect(slips(changes), JSON.stringify(changes)).toEqual(expected)
  })

  it('asks for a guardian under the age of majority on the first day, with the relation', () => {
    expect(slips({ birthDate: '2009-02-15' })).toEqual(['guardianName:minor'])
    expect(slips({ birthDate: '2009-02-14' })).toEqual([])
    expect(slips({ birthDate: '2015-02-15', guardianName: 'Alban' })).toEqual(['guardianRelation:empty'])
    expect(slips({ birthDate: '2015-02-15', guardianName: 'Alban', guardianRelation: 'parent' })).toEqual([])
  })

  it('takes the guardian’s phone for a way to reach somebody', () => {
    const child = { birthDate: '2015-02-15', phone: '', guardianName: 'Alban', guardianRelation: 'parent' }
    expect(slips(child)).toEqual(['phone:nobody_reachable'])
    expect(slips({ ...child, guardianPhone: '+43 000 1' })).toEqual([])
  })

  it('does not let anybody up to 21 kg, 47 lb, be set as type III', () => {
    const child = {
      bornBy: 'age',
      age: '6',
      guardianName: 'Alban',
      guardianRelation: 'parent',
      skierType: 'III',
    }
    expect(slips({ ...child, mass: '21,9' })).toEqual(['skierType:light'])
    expect(slips({ ...child, mass: '22' })).toEqual([])
    expect(isLight({ unit: 'st-lb', stone: 3, pounds: 5.9 })).toBe(true)
    expect(isLight({ unit: 'lb', value: 48 })).toBe(false)
  })
})

describe('the age that the table is read with', () => {
  const days = { startsOn: '2027-02-14', endsOn: '2027-02-16' }
  it('is the lower value’s where a tenth or fiftieth birthday falls inside the rental', () => {
    expect(ageForTable({ birthDate: '2017-02-16', age: null }, days)).toBe(9)
    expect(ageForTable({ birthDate: '1977-02-16', age: null }, days)).toBe(50)
    expect(ageForTable({ birthDate: '1977-02-17', age: null }, days)).toBe(49)
    expect(ageForTable({ birthDate: null, age: 31 }, days)).toBe(31)
    expect(ageForTable({ birthDate: '2027-02-15', age: null }, days)).toBeNull()
  })
})

describe('a kept draft', () => {
  it('comes back as it was typed, with what it lacks as it is at first, and nothing foreign', () => {
    const draft = draftFrom({ mass: '70,', foreign: 'x' }, { startsOn: '2027-02-14' })
    expect(draft).toEqual({ ...emptyDraft, mass: '70,', startsOn: '2027-02-14' })
  })
})

describe('the rules that phone and server share', () => {
  it('find nothing wrong with a form that a full draft amounts to', () => {
    const result = read()
    expect(result.ok && formProblems(result.form, facts)).toEqual([])
  })
})
