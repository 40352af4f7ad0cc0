import { describe, expect, it } from 'vitest'
import type { ReleaseInput } from '#shared/release/releaseInput'
import { releaseSetting } from '#shared/release/releaseSetting'
import type { EditionName } from '#shared/release/selectionTable'
import type { Height, Mass } from '#shared/units/bodySchemas'
import { printedEightColumns, printedRows, printedSixColumns } from './fixtures/selectionTable'

const lines = (text: string) =>
  text
    .trim()
    .split('\n')
    .map((line) => line.trim().split(/\s+/))
const number = (text: string | undefined) =>
  text === undefined || text === '-' || text === '' ? null : Number(text)
const ends = (text = '-') => (text === '-' ? null : (text.split('..') as [string, string]))
const kg = (value: number): Mass => ({ value, unit: 'kg' })
const lb = (value: number): Mass => ({ value, unit: 'lb' })
const cm = (value: number): Height => ({ value, unit: 'cm' })
const feet = (text: string): Height => {
  const [, whole, inches] = /^(\d)'(\d+)"$/.exec(text) ?? []
  return { feet: Number(whole), inches: Number(inches), unit: 'ft-in' }
}

const rows = lines(printedRows).map(([code = '', massKg, massLb, heightCm, heightFtIn, twist, lean]) => ({
  code,
  massKg: ends(massKg),
  massLb: ends(massLb),
  heightCm: ends(heightCm),
  heightFtIn: ends(heightFtIn),
  twistNm: Number(twist),
  forwardLeanNm: Number(lean),
}))

/** Somebody whose mass, height, age and request move nothing. */
const plain: ReleaseInput = { mass: kg(110), height: cm(205), age: 30, skierType: 'I', soleLengthMm: 300 }
const rowOf = (changes: Partial<ReleaseInput>) => {
  const result = releaseSetting({ ...plain, ...changes })
  return 'row' in result ? result.row : result.reason
}

describe('the bands of the rows', () => {
  for (const { code, massKg, massLb, heightCm, heightFtIn } of rows) {
    const ok = (given: Partial<ReleaseInput>) => {
      // the sole is as short as every row allows, so that no row is left for lack of a value
      expect(rowOf({ soleLengthMm: 150, ...given })).toBe(code)
    }
    if (massKg && massLb) {
      it(`puts ${massKg.join('–')} kg and ${massLb.join('–')} lb into row ${code}`, () => {
        for (const end of massKg) if (end) ok({ mass: kg(Number(end)) })
        if (massKg[1]) ok({ mass: kg(Number(massKg[1]) + 0.9) })
        for (const end of massLb) if (end) ok({ mass: lb(Number(end)) })
        if (massLb[1]) ok({ mass: lb(Number(massLb[1]) + 0.9) })
        for (const end of massLb) {
          if (end)
            ok({ mass: { stone: Math.floor(Number(end) / 14), pounds: Number(end) % 14, unit: 'st-lb' } })
        }
      })
    }
    if (heightCm && heightFtIn) {
      it(`puts ${heightCm.join('–')} cm and ${heightFtIn.join('–')} into row ${code}`, () => {
        for (const end of heightCm) if (end) ok({ height: cm(Number(end)) })
        if (heightCm[1]) ok({ height: cm(Number(heightCm[1]) + 0.9) })
        for (const end of heightFtIn) if (end) ok({ height: feet(end) })
      })
    }
  }

  it('takes a height of 50 cm and one of 1 foot as row H, like any height', () => {
    expect(rowOf({ height: cm(50), soleLengthMm: 300 })).toBe('H')
    expect(rowOf({ height: { feet: 1, inches: 0, unit: 'ft-in' } })).toBe('H')
  })
})

/** Inputs that land in a row: its own mass, or the heaviest with a type that moves down. */
function inputsOfRow(code: string): Partial<ReleaseInput> {
  const row = rows.find((each) => each.code === code)
  if (row?.massKg) return { mass: kg(Number(row.massKg[0])) }
  return { skierType: code === 'N' ? 'II' : code === 'O' ? 'III' : 'III+' }
}

const printed: [EditionName, string][] = [
  ['eight-column', printedEightColumns],
  ['six-column', printedSixColumns],
]
for (const [edition, text] of printed) {
  describe(`the ${edition} edition`, () => {
    const [head = [], ...body] = lines(text)
    const columns = head.slice(1).map((band) => ends(band))

    for (const [code = '', ...cells] of body) {
      it(`gives row ${code} its printed value and torques in every column`, () => {
        const values = cells.map(number)
        const first = values.findIndex((value) => value !== null)
        const last = values.findLastIndex((value) => value !== null)
        const row = rows.find((each) => each.code === code)
        expect(columns).toHaveLength(values.length)
        values.forEach((value, column) => {
          const [from, to] = columns[column] ?? ['', '']
          for (const soleLengthMm of [
            Number(from || 150),
            Number(from || 150) - (from ? 0.9 : 0),
            Number(to || 400),
          ]) {
            const { steps, ...result } = withSteps(
              releaseSetting({ ...plain, ...inputsOfRow(code), edition, soleLengthMm }),
            )
            expect(steps.length).toBeGreaterThan(0)
            expect(result).toEqual(
              column > last
                ? { ok: false, reason: 'sole_longer_than_row', row: code, sidewaysValue: values[last] }
                : {
                    ok: true,
                    row: code,
                    value: column < first ? values[first] : value,
                    sideways: column < first,
                    twistNm: row?.twistNm,
                    forwardLeanNm: row?.forwardLeanNm,
                  },
            )
          }
        })
      })
    }

    it('gives row P no value in any column', () => {
      for (const [from] of columns.map((column) => column ?? [''])) {
        const soleLengthMm = Number(from || 150)
        expect(releaseSetting({ ...plain, skierType: 'III+', edition, soleLengthMm })).toMatchObject({
          ok: false,
          reason: 'row_without_values',
          row: 'P',
        })
      }
    })
  })
}

function withSteps(result: ReturnType<typeof releaseSetting>) {
  if (!('steps' in result)) throw new Error('not well formed')
  return result
}
