import type { SkierType } from '#shared/release/rules'

/**
 * The product's own sentences by which a renter says how they ski, in the order of release; the type behind a
 * sentence is never asked for. The renter's form shows these very words (a test holds its texts to them), and a
 * shop's manager signs each language before a real renter reads it.
 */
export const skierTypeSentences: Readonly<Record<'en' | 'de', Readonly<Record<SkierType, string>>>> = {
  en: {
    'I-': 'Very carefully: it may rather open once too often',
    I: 'Slowly and with care, on easy slopes',
    II: 'At a medium pace, on most kinds of slope',
    III: 'Fast and with force, steep slopes too',
    'III+': 'Very fast, and it should hold longer than is usual',
  },
  de: {
    'I-': 'Sehr vorsichtig: Die Bindung darf lieber einmal zu oft aufgehen',
    I: 'Langsam und bedacht, auf leichten Pisten',
    II: 'In mittlerem Tempo, auf den meisten Pisten',
    III: 'Schnell und mit Kraft, auch im Steilen',
    'III+': 'Sehr schnell, und die Bindung soll länger halten als üblich',
  },
}
