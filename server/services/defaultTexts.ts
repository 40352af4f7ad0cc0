import type { TextKind, TextLocale } from '#shared/api/shop'
import { skierTypes } from '#shared/release/rules'
import { skierTypeSentences } from '#shared/renters/skierTypeSentences'

/** A text that the product brings; a shop's manager reads and signs it, until then it is marked "not reviewed". */
export interface DefaultText {
  kind: 'acknowledgement'
  locale: TextLocale
  body: string
}

/**
 * The one text of the product's own that a renter signs: that the data are theirs and the numbers were read. It is
 * no waiver and no terms; those are the shop's.
 */
const acknowledgements: Record<TextLocale, string> = {
  en: [
    'The body mass, height, age and way of skiing above are what I told the shop, and they are true as far as I know.',
    'I have read the numbers that were set on my two skis.',
    'I know that no binding opens in every fall and none holds in every turn.',
    'I leave the settings as they are. If they seem wrong, or my boots or my data change, I come back to the shop.',
  ].join('\n'),
  de: [
    'Körpergewicht, Größe, Alter und Fahrweise oben habe ich dem Verleih so angegeben, und sie stimmen, soweit ich weiß.',
    'Ich habe die Werte gelesen, die an meinen beiden Skiern eingestellt sind.',
    'Ich weiß, dass keine Bindung bei jedem Sturz öffnet und keine in jedem Schwung hält.',
    'Ich lasse die Einstellung, wie sie ist. Wenn sie mir falsch vorkommt oder sich Schuhe oder Angaben ändern, komme ich in den Verleih zurück.',
  ].join('\n'),
}

/** The product's own wording of a text. */
export function productText(kind: TextKind, locale: TextLocale): string {
  return kind === 'acknowledgement'
    ? acknowledgements[locale]
    : skierTypes.map((type) => `${type}: ${skierTypeSentences[locale][type]}`).join('\n')
}

/** What a new shop begins with. The skier-type sentences are the program's own and get a version when signed. */
export const defaultTexts = (): DefaultText[] => [
  { kind: 'acknowledgement', locale: 'en', body: acknowledgements.en },
  { kind: 'acknowledgement', locale: 'de', body: acknowledgements.de },
]
