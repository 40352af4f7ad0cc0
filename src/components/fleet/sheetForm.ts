import type { saveBindingModel } from '#shared/api/models'
import type { BodyOf } from '#shared/api/define'
import { knownSoleTypes, type KnownSoleType } from '#shared/compatibility/soleFit'
import type { TrackModel } from '#shared/track/trackModel'
import type { BindingSheet } from '../../api/fleet'

/** What a sheet says of a sole type; one that it does not name is a head technician's to decide. */
export type SoleSaid = 'accepts' | 'refuses' | 'unnamed'

/** The numbers of a sheet in the order in which they are asked for, by what they belong to. */
export const numberGroups = {
  sole: ['soleMin', 'soleMax'],
  toe: ['toeZero', 'toeNotch', 'toeFirst', 'toeLast'],
  heel: ['heelZero', 'heelNotch', 'heelFirst', 'heelLast'],
  gap: ['gapMin', 'gapMax', 'centre'],
  scale: ['scaleMin', 'scaleMax', 'fineStep', 'fineUpTo'],
} as const
export type NumberGroup = keyof typeof numberGroups
export type NumberField = (typeof numberGroups)[NumberGroup][number]
const numberFields: readonly NumberField[] = Object.values(numberGroups).flat()
export const wholeFields: ReadonlySet<NumberField> = new Set(['toeFirst', 'toeLast', 'heelFirst', 'heelLast'])

/** A binding's sheet as it is typed. Numbers are null while nothing is typed. */
export interface SheetForm {
  name: string
  numbers: Record<NumberField, number | null>
  /** The indicator's step above the finer ones; null where one step goes all the way. */
  coarseStep: number | null
  coupled: boolean
  screw: boolean
  lead: number | null
  maxTurns: number | null
  tie: 'loose' | 'tight'
  toeMarks: string
  heelMarks: string
  soles: Record<KnownSoleType, SoleSaid>
  brakeMm: number | null
  manualDocument: string
  manualEdition: string
  manualPage: string
  windowNote: string
}

function numbersOf(track: TrackModel): SheetForm['numbers'] {
  const [fine] = track.indicatorStep
  return {
    soleMin: track.soleLengthMm.min,
    soleMax: track.soleLengthMm.max,
    toeZero: track.toe.zeroMm,
    toeNotch: track.toe.notchMm,
    toeFirst: track.toe.first,
    toeLast: track.toe.last,
    heelZero: track.heel.zeroMm,
    heelNotch: track.heel.notchMm,
    heelFirst: track.heel.first,
    heelLast: track.heel.last,
    gapMin: track.gapWindowMm.min,
    gapMax: track.gapWindowMm.max,
    centre: track.centreWindowMm,
    scaleMin: track.releaseValue.min,
    scaleMax: track.releaseValue.max,
    fineStep: fine?.step ?? null,
    fineUpTo: fine && 'upTo' in fine ? fine.upTo : track.releaseValue.max,
  }
}
const nothingTyped = Object.fromEntries(numberFields.map((field) => [field, null])) as SheetForm['numbers']

/** The form of a sheet that there is, or an empty one. */
export function sheetForm(sheet: BindingSheet | null): SheetForm {
  const track = sheet?.track
  const coarse = track?.indicatorStep.find((step) => 'above' in step)
  const said = (type: KnownSoleType): SoleSaid =>
    sheet?.accepts.includes(type) ? 'accepts' : sheet?.refuses.includes(type) ? 'refuses' : 'unnamed'
  return {
    name: sheet?.name ?? '',
    numbers: track ? numbersOf(track) : { ...nothingTyped, toeFirst: 0, heelFirst: 0 },
    coarseStep: coarse?.step ?? null,
    coupled: track?.coupled ?? false,
    screw: Boolean(track?.fineScrew),
    lead: track?.fineScrew?.leadMm ?? null,
    maxTurns: track?.fineScrew?.maxTurns ?? null,
    tie: track?.gapTie ?? 'loose',
    toeMarks: track?.marks.toe.join(' ') ?? '',
    heelMarks: track?.marks.heel.join(' ') ?? '',
    soles: Object.fromEntries(knownSoleTypes.map((type) => [type, said(type)])) as SheetForm['soles'],
    brakeMm: sheet?.brakeMm ?? null,
    manualDocument: sheet?.manualDocument ?? '',
    manualEdition: sheet?.manualEdition ?? '',
    manualPage: sheet?.manualPage ?? '',
    windowNote: sheet?.windowNote ?? '',
  }
}

/** Marks as they were typed, a space between each two. */
const marksOf = (typed: string) => typed.split(/\s+/).filter(Boolean)

/** Fields with a number that is missing or is none. */
export function missingNumbers(form: SheetForm): NumberField[] {
  const lacking = (value: number | null) => value === null || Number.isNaN(value)
  return numberFields.filter(
    (field) =>
      lacking(form.numbers[field]) || (wholeFields.has(field) && !Number.isInteger(form.numbers[field])),
  )
}

/** The geometry that was typed; call it when no number is missing. */
export function trackOf(form: SheetForm, id: string): TrackModel {
  const number = (field: NumberField) => form.numbers[field] ?? NaN
  const rail = (unit: 'toe' | 'heel') => ({
    zeroMm: number(`${unit}Zero`),
    notchMm: number(`${unit}Notch`),
    first: number(`${unit}First`),
    last: number(`${unit}Last`),
  })
  const [fineStep, fineUpTo] = [number('fineStep'), number('fineUpTo')]
  return {
    id,
    soleLengthMm: { min: number('soleMin'), max: number('soleMax') },
    toe: rail('toe'),
    heel: rail('heel'),
    coupled: form.coupled,
    fineScrew: form.screw ? { leadMm: form.lead ?? NaN, maxTurns: form.maxTurns ?? NaN } : null,
    gapWindowMm: { min: number('gapMin'), max: number('gapMax') },
    gapTie: form.tie,
    releaseValue: { min: number('scaleMin'), max: number('scaleMax') },
    centreWindowMm: number('centre'),
    marks: { toe: marksOf(form.toeMarks), heel: marksOf(form.heelMarks) },
    indicatorStep: [
      { upTo: fineUpTo, step: fineStep },
      ...(form.coarseStep === null ? [] : [{ above: fineUpTo, step: form.coarseStep }]),
    ],
  }
}

/** What is sent for the sheet that was typed. */
export function sheetBody(form: SheetForm, sheet: BindingSheet | null): BodyOf<typeof saveBindingModel> {
  const saying = (said: SoleSaid) => knownSoleTypes.filter((type) => form.soles[type] === said)
  const name = form.name.trim()
  return {
    id: sheet?.id ?? null,
    version: sheet?.version ?? null,
    name,
    track: trackOf(form, sheet?.track.id ?? name),
    accepts: saying('accepts'),
    refuses: saying('refuses'),
    brakeMm: form.brakeMm,
    manualDocument: form.manualDocument.trim(),
    manualEdition: form.manualEdition.trim(),
    manualPage: form.manualPage.trim(),
    windowNote: form.windowNote.trim(),
  }
}
