import { z } from 'zod'
import { skierTypeSchema } from '#shared/release/releaseInput'
import { id, instant, side } from '#shared/schemas/common'
import { partReading } from '#shared/schemas/records'
import { rowStep } from '#shared/schemas/fittings'
import { trackModelSchema } from '#shared/track/trackModel'
import { heightSchema, massSchema } from '#shared/units/bodySchemas'
import { command, read } from './define'

/** Signs what was read at both skis, by PIN. From then on the fitting can be handed over. */
export const signRecord = command({
  kind: 'records.sign',
  path: '/api/records/sign',
  access: 'records.sign',
  body: z.strictObject({ fittingId: id }),
  ids: z.object({ recordId: id }),
})

const source = z.enum(['declared', 'measured'])

/** A record as staff see and print it. Names and body values are looked up; once erased they are null. */
export const getRecord = read({
  path: '/api/records/:id',
  access: 'renters.read',
  params: z.object({ id }),
  answer: z.object({
    id,
    number: z.number().int(),
    fittingId: id,
    shop: z.object({ name: z.string(), zone: z.string() }),
    site: z.string(),
    signedBy: z.string(),
    signedDevice: z.string().nullable(),
    signedAt: instant,
    renter: z.object({ firstName: z.string(), lastName: z.string() }).nullable(),
    inputs: z
      .object({
        mass: massSchema,
        massSource: source,
        height: heightSchema,
        heightSource: source,
        age: z.number().int(),
        skierType: skierTypeSchema,
      })
      .nullable(),
    boots: z.object({ code: z.string().nullable(), soleLengthMm: z.number().int(), soleType: z.string() }),
    skiPair: z.object({ code: z.string(), lengthCm: z.number().int(), binding: z.string() }),
    track: trackModelSchema,
    /** Whether the binding's sheet is still the one that was set by: its marks are read off it. */
    sheetUnchanged: z.boolean(),
    row: z.string(),
    value: z.number(),
    twistNm: z.number().int(),
    forwardLeanNm: z.number().int(),
    rowSteps: z.array(rowStep),
    target: z.object({ toe: z.number().int(), heel: z.number().int(), turns: z.number().nullable() }),
    edition: z.string(),
    rulesVersion: z.string(),
    /** Whether the shop's head technician had signed these numbers when the fitting was computed. */
    approved: z.boolean(),
    approvedBy: z.object({ name: z.string(), at: instant }).nullable(),
    decisions: z.array(z.object({ kind: z.string(), reason: z.string(), by: z.string() })),
    parts: z.array(
      z.object({
        side,
        label: z.string(),
        targetToeValue: z.number(),
        targetHeelValue: z.number(),
        reading: partReading,
        verdict: z.string(),
        readBy: z.string(),
        readAt: instant,
      }),
    ),
    handOver: z
      .object({
        at: instant,
        signedAs: z.enum(['renter', 'guardian']),
        textVersion: z.number().int(),
        /** Null once they were erased. */
        signedName: z.string().nullable(),
        signaturePng: z.string().nullable(),
      })
      .nullable(),
    correctsId: id.nullable(),
    correctionReason: z.string().nullable(),
    /** The record that corrects this one. */
    correctedById: id.nullable(),
  }),
})
