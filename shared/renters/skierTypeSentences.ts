import type { SkierType } from '#shared/release/rules'

/**
 * The product's own sentences by which a renter says how they ski, in the order of release. The type behind a
 * sentence is never asked for. German is a translation; a shop's manager signs both before a real renter reads them.
 */
export const skierTypeSentences: Readonly<Record<'en' | 'de', Readonly<Record<SkierType, string>>>> = {
  en: {
    'I-': 'I am learning, or I want my bindings to open as easily as they can.',
    I: 'I ski slowly and carefully on easy slopes, and I like bindings that open easily.',
    II: 'I ski at a medium speed on most slopes, neither slowly nor hard.',
    III: 'I ski fast or hard, on steep slopes too, and I accept that my bindings hold longer.',
    'III+': 'I ski harder than most fast skiers, and I accept that my bindings hold longest.',
  },
  de: {
    'I-': 'Ich lerne noch, oder meine Bindung soll so leicht öffnen, wie sie kann.',
    I: 'Ich fahre langsam und vorsichtig auf leichten Pisten und mag es, wenn die Bindung leicht öffnet.',
    II: 'Ich fahre mit mittlerem Tempo auf den meisten Pisten, weder langsam noch hart.',
    III: 'Ich fahre schnell oder hart, auch auf steilen Pisten, und nehme hin, dass die Bindung länger hält.',
    'III+':
      'Ich fahre härter als die meisten schnellen Fahrer und nehme hin, dass die Bindung am längsten hält.',
  },
}
