import { z } from 'zod'

/** What is looked at before an item goes out again. Each is sound, or a fault, or a fault that was put right. */
export const skiChecks = ['edge', 'base', 'brake', 'heel', 'toe', 'slide_plate', 'screws'] as const
export const bootChecks = ['sole_wear', 'buckles', 'shell', 'liner'] as const

const finding = z.enum(['sound', 'put_right', 'fault'])
export type Finding = z.infer<typeof finding>

export const skiInspection = z.strictObject(
  Object.fromEntries(skiChecks.map((check) => [check, finding])) as Record<
    (typeof skiChecks)[number],
    typeof finding
  >,
)
export const bootInspection = z.strictObject(
  Object.fromEntries(bootChecks.map((check) => [check, finding])) as Record<
    (typeof bootChecks)[number],
    typeof finding
  >,
)
export const inspectionChecks = z.union([skiInspection, bootInspection])
export type InspectionChecks = z.infer<typeof inspectionChecks>
