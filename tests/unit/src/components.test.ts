import { mount } from '@vue/test-utils'
import { nextTick } from 'vue'
import { createI18n } from 'vue-i18n'
import { describe, expect, it, vi } from 'vitest'
import BaseButton from '../../../src/components/base/BaseButton.vue'
import BasePinEntry from '../../../src/components/base/BasePinEntry.vue'
import BaseReleaseValue from '../../../src/components/base/BaseReleaseValue.vue'
import BaseStateTag from '../../../src/components/base/BaseStateTag.vue'
import { toastMs, useToasts } from '../../../src/components/base/feedback/useToasts'
import BaseErrorSummary from '../../../src/components/base/fields/BaseErrorSummary.vue'
import BaseField from '../../../src/components/base/fields/BaseField.vue'
import BaseNumberInput from '../../../src/components/base/fields/BaseNumberInput.vue'
import NotchRule from '../../../src/components/rule/NotchRule.vue'
import { junior, ladder, oneLever, withScrew } from '../../../src/components/design/sampleTracks'
import { pluralForm } from '../../../src/i18n/plurals'
import deCommon from '../../../src/i18n/locales/de/common.json'
import deRule from '../../../src/i18n/locales/de/rule.json'
import enCommon from '../../../src/i18n/locales/en/common.json'
import enRule from '../../../src/i18n/locales/en/rule.json'
import enStaff from '../../../src/i18n/locales/en/staff.json'

function words(locale: 'en' | 'de' = 'en') {
  const i18n = createI18n({
    legacy: false,
    locale,
    pluralRules: { en: pluralForm, de: pluralForm },
    messages: {
      en: { common: enCommon, rule: enRule, staff: enStaff },
      de: { common: deCommon, rule: deRule, staff: enStaff },
    },
  })
  return { global: { plugins: [i18n] } }
}

describe('a key', () => {
  it('takes no second press while it is busy', async () => {
    const key = mount(BaseButton, { ...words(), props: { variant: 'primary' } })
    await key.trigger('click')
    await key.setProps({ busy: true })
    await key.trigger('click')
    expect(key.emitted('press')).toHaveLength(1)
    expect(key.attributes('disabled')).toBeUndefined()
    expect(key.attributes('aria-busy')).toBe('true')
  })
})

describe('a number field', () => {
  const type = async (text: string, locale: 'en' | 'de' = 'en') => {
    const field = mount(BaseNumberInput, { ...words(locale), props: { modelValue: null } })
    await field.get('input').setValue(text)
    return field
  }
  it.each([
    ['70,5', 70.5],
    ['70.5', 70.5],
    [' 70 ', 70],
  ])('reads %s', async (text, number) => {
    expect((await type(text)).emitted('update:modelValue')!.at(-1)).toEqual([number])
  })

  it('says when it holds no number, and leaves what was typed', async () => {
    const field = await type('7o')
    expect(field.emitted('update:modelValue')!.at(-1)).toEqual([NaN])
    expect(field.get('input').element.value).toBe('7o')
  })

  it('does not rewrite typing that comes back as the model', async () => {
    const field = await type('70,')
    await field.setProps({ modelValue: 70 })
    expect(field.get('input').element.value).toBe('70,')
  })

  it("writes a number from outside in the reader's way", async () => {
    const field = mount(BaseNumberInput, { ...words('de'), props: { modelValue: 6.5 } })
    expect(field.get('input').element.value).toBe('6,5')
    await field.setProps({ modelValue: 7.25 })
    expect(field.get('input').element.value).toBe('7,25')
  })
})

describe('a field', () => {
  it('ties its label, hint and error to the control', () => {
    const field = mount(BaseField, {
      ...words(),
      props: { label: 'Body mass', hint: 'in kg', error: 'Body mass is 10 to 200 kg', name: 'mass' },
      slots: { default: BaseNumberInput },
    })
    const input = field.get('input')
    expect(field.get('label').attributes('for')).toBe(input.attributes('id'))
    expect(input.attributes('aria-invalid')).toBe('true')
    const described = input
      .attributes('aria-describedby')!
      .split(' ')
      .map((id) => field.get(`#${id}`).text())
    expect(described).toEqual(['Body mass is 10 to 200 kg', 'in kg'])
  })

  it('is reached from the summary on top, which takes the focus when it appears', async () => {
    const page = mount(
      {
        components: { BaseErrorSummary, BaseField, BaseNumberInput },
        props: { errors: Array },
        template:
          '<div><BaseErrorSummary :errors="errors" /><BaseField label="Body mass" name="mass"><BaseNumberInput /></BaseField></div>',
      },
      { ...words(), props: { errors: [] as { name: string; text: string }[] }, attachTo: document.body },
    )
    await page.setProps({ errors: [{ name: 'mass', text: 'Body mass is missing' }] })
    await nextTick()
    expect(document.activeElement?.textContent).toContain('One thing to put right')
    await page.get('a').trigger('click')
    expect(document.activeElement?.id).toBe('field-mass')
    page.unmount()
  })
})

describe('a state', () => {
  it('is a glyph and a word', () => {
    const tag = mount(BaseStateTag, { ...words(), props: { state: 'unchecked' } })
    expect(tag.text()).toBe('unchecked')
    expect(tag.find('svg path').exists()).toBe(true)
  })
})

describe('a release value', () => {
  it('says that the shop has not approved its numbers, until it has', async () => {
    const value = mount(BaseReleaseValue, { ...words('de'), props: { value: 6.5, approved: false } })
    expect(value.text()).toContain('6,5')
    expect(value.text()).toContain('von diesem Verleih nicht freigegeben')
    await value.setProps({ approved: true })
    expect(value.text()).toBe('6,5')
  })
})

describe('the PIN', () => {
  it('says how many digits were typed and shows none', () => {
    const pin = mount(BasePinEntry, { ...words(), props: { typed: 4 } })
    expect(pin.attributes('aria-label')).toBe('PIN, 4 of 6 digits typed')
    expect(pin.findAll('.solid')).toHaveLength(4)
    expect(pin.text()).toBe('')
  })
})

describe('the notch rule in words', () => {
  const label = (props: InstanceType<typeof NotchRule>['$props'], locale: 'en' | 'de' = 'en') =>
    mount(NotchRule, { ...words(locale), props })
      .get('svg')
      .attributes('aria-label')

  it('speaks in printed marks and moves', () => {
    expect(
      label({
        model: ladder,
        side: 'left',
        soleLengthMm: 305,
        at: { toe: 4, heel: 4 },
        to: { toe: 7, heel: 3 },
      }),
    ).toBe(
      'Left ski: heel from mark 4 to mark 3, 1 notch forward; toe from mark 4 to mark 7, 3 notches forward; sole 305 mm',
    )
  })

  it('names letters where the rail has letters', () => {
    expect(label({ model: junior, at: { toe: 5, heel: 11 }, to: { toe: 3, heel: 5 } })).toBe(
      'heel from mark 11 to mark 5, 6 notches forward; toe from mark F to mark D, 2 notches back',
    )
  })

  it('has one lever where one lever moves both units', () => {
    expect(label({ model: oneLever, at: { toe: 3, heel: 3 }, to: { toe: 9, heel: 9 } })).toBe(
      'lever from mark 275 to mark 305, 6 notches longer',
    )
  })

  it('turns the screw from where it is known to stand, else from its neutral mark', () => {
    const to = { toe: 5, heel: 4, turns: -0.75 }
    expect(label({ model: withScrew, at: { toe: 5, heel: 4, turns: 0.5 }, to }, 'de')).toContain(
      'Schraube: 1,25 Umdrehungen lösen',
    )
    expect(label({ model: withScrew, at: { toe: 5, heel: 4 }, to })).toContain(
      'screw: bring it to its neutral mark first',
    )
  })

  it('says where it stands when nothing is planned', () => {
    expect(label({ model: oneLever, at: { toe: 8, heel: 8 } })).toBe('lever at mark 300')
  })

  it('draws hollow pins where units stand and solid ones where they must go', () => {
    const rule = mount(NotchRule, {
      ...words(),
      props: { model: ladder, at: { toe: 4, heel: 4 }, to: { toe: 7, heel: 4 } },
    })
    expect(rule.findAll('.hollow')).toHaveLength(2)
    expect(rule.findAll('.solid')).toHaveLength(2)
    expect(rule.findAll('.head')).toHaveLength(1)
  })
})

describe('a toast', () => {
  it('offers to take back for ten seconds', async () => {
    vi.useFakeTimers()
    const { show, undo, toasts } = useToasts()
    const takeBack = vi.fn()
    const id = show({ text: 'S093 cleared', undo: takeBack })
    await undo(id)
    expect(takeBack).toHaveBeenCalledOnce()
    show({ text: 'S094 cleared', undo: takeBack })
    vi.advanceTimersByTime(toastMs - 1)
    expect(toasts.value).toHaveLength(1)
    vi.advanceTimersByTime(1)
    expect(toasts.value).toHaveLength(0)
    vi.useRealTimers()
  })
})
