import { describe, expect, it } from 'vitest'
import { problems } from '#shared/errors'
import { itemStates } from '#shared/lifecycle/itemStates'
import { roles } from '#shared/permissions'
import { bestLocale, locales } from '../../../src/i18n/locales'
import { pluralForm } from '../../../src/i18n/plurals'
import { stations } from '../../../src/router/stations'

type Texts = { [key: string]: string | Texts }
const files = import.meta.glob<{ default: Texts }>('../../../src/i18n/locales/*/*.json', { eager: true })

function flat(texts: Texts, path = ''): Record<string, string> {
  return Object.assign(
    {},
    ...Object.entries(texts).map(([key, value]) =>
      typeof value === 'string' ? { [path + key]: value } : flat(value, `${path}${key}.`),
    ),
  ) as Record<string, string>
}
const areas: Record<string, Record<string, Record<string, string>>> = {}
for (const [path, file] of Object.entries(files)) {
  const [, locale, area] = /locales\/(\w+)\/(\w+)\.json$/.exec(path)!
  ;(areas[area!] ??= {})[locale!] = flat(file.default)
}
const gaps = (text: string) =>
  [...text.matchAll(/\{(\w+)\}/g)]
    .map(([, name]) => name)
    .filter((name, i, all) => all.indexOf(name) === i)
    .sort()

describe.each(Object.entries(areas))('the texts of %s', (_area, byLocale) => {
  it('are there in every language, with the same gaps and as many plural forms', () => {
    const english = byLocale.en!
    for (const locale of Object.keys(locales)) {
      const texts = byLocale[locale] ?? {}
      expect(Object.keys(texts).sort()).toEqual(Object.keys(english).sort())
      for (const [key, text] of Object.entries(texts)) {
        expect(gaps(text), key).toEqual(gaps(english[key]!))
        expect(text.split(' | ').length, key).toBe(english[key]!.split(' | ').length)
        expect(text.trim() === '', key).toBe(english[key]!.trim() === '')
      }
    }
  })

  it('say no oops, no invalid and no please, and claim nothing', () => {
    const banned = /\b(oops|ups|invalid|please|bitte|compliant|certified|zertifiziert|normgerecht)\b/i
    for (const texts of Object.values(byLocale)) {
      expect(Object.entries(texts).filter(([, text]) => banned.test(text))).toEqual([])
    }
  })
})

describe('words for everything that has a code', () => {
  it.each(Object.keys(locales))('%s words every problem the server knows', (locale) => {
    const worded = { ...areas.problems![locale], ...areas.staffProblems![locale] }
    const missing = Object.keys(problems).filter((code) => !worded[`${code}.what`] || !worded[`${code}.next`])
    expect(missing).toEqual([])
    const codes = Object.keys(worded).map((key) => key.split('.').slice(0, 2).join('.'))
    // What can go wrong before an answer exists is the client's own to say.
    expect(codes.filter((code) => !(code in problems) && !code.startsWith('network.'))).toEqual([])
  })

  it.each(Object.keys(locales))('%s words every state, role and station', (locale) => {
    const staff = areas.staff![locale]!
    expect(itemStates.filter((state) => !staff[`states.${state}`])).toEqual([])
    expect(roles.filter((role) => !staff[`roles.${role}`])).toEqual([])
    expect(Object.keys(stations).filter((station) => !staff[`stations.${station}`])).toEqual([])
  })
})

describe('language', () => {
  it("is the first of the browser's that the program speaks", () => {
    expect(bestLocale([null, 'fr-FR', 'de-AT', 'en'])).toBe('de')
    expect(bestLocale(['fr'])).toBe('en')
  })

  it('counts one, many and parts of a turn', () => {
    expect([0, 1, 2, 0.25].map((count) => pluralForm(count, 2))).toEqual([1, 0, 1, 1])
    expect([0, 1, 2].map((count) => pluralForm(count, 3))).toEqual([0, 1, 2])
  })
})
