import { z } from 'zod'

const railSchema = z
  .strictObject({
    /** Distance of notch 0 from the mounting mark, in mm towards the unit's own end of the ski. */
    zeroMm: z.number(),
    notchMm: z.number().positive(),
    first: z.int(),
    last: z.int(),
  })
  .refine(({ first, last }) => first <= last && last - first < 200, { message: 'expected 1 to 200 notches' })

const windowSchema = z
  .strictObject({ min: z.number(), max: z.number() })
  .refine(({ min, max }) => min <= max, { message: 'expected min not above max' })

const rangeSchema = z.strictObject({ min: z.number(), max: z.number() })

/**
 * The geometry of a track binding. Distances in mm along the ski from the mounting mark, positive towards the
 * unit's own end: the toe stands at toe.zeroMm + notch · toe.notchMm, the heel at heel.zeroMm + notch · heel.notchMm.
 *
 * The gap is toe + heel - sole length: positive is more space than the sole needs (too little forward pressure).
 * The centre shift is toe - half the sole length: positive is a boot that sits forward. Windows hold both ends.
 * A coupled track stands at the same notch number on both rails.
 */
export const trackModelSchema = z.strictObject({
  id: z.string(),
  /** Sole lengths that the track takes. */
  soleLengthMm: rangeSchema,
  toe: railSchema,
  heel: railSchema,
  coupled: z.boolean(),
  /** Turns from the neutral mark, positive tightens; one turn closes leadMm of gap. */
  fineScrew: z.strictObject({ leadMm: z.number().positive(), maxTurns: z.number().min(0) }).nullable(),
  gapWindowMm: windowSchema,
  /** Of two equally good positions: the one with more space (loose) or with less (tight). */
  gapTie: z.enum(['loose', 'tight']),
  /** Ends of the indicator scale. */
  releaseValue: rangeSchema,
  centreWindowMm: z.number(),
  /** What is printed at each notch of a rail, from its first notch on. */
  marks: z.strictObject({ toe: z.array(z.string()), heel: z.array(z.string()) }),
  /** How finely the indicator can be set and read: steps up to and above a value. */
  indicatorStep: z.array(
    z.union([
      z.strictObject({ upTo: z.number(), step: z.number().positive() }),
      z.strictObject({ above: z.number(), step: z.number().positive() }),
    ]),
  ),
})
export type TrackModel = z.infer<typeof trackModelSchema>
export type TrackRail = TrackModel['toe']
export type TrackUnit = 'toe' | 'heel'
