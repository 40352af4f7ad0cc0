import { z } from 'zod'

/** Building blocks that every noun's schemas share. */
export const id = z.uuid()
/** An instant with its offset, as it travels. */
export const instant = z.iso.datetime({ offset: true })
/** A day of the shop, without a zone. */
export const day = z.iso.date()
export const side = z.enum(['left', 'right'])
export type Side = z.infer<typeof side>
export const unit = z.enum(['toe', 'heel'])
export type Unit = z.infer<typeof unit>
export const itemKind = z.enum(['ski_pair', 'boots'])
/** One line of text that a person typed: trimmed, without control characters. */
export const line = (max: number) =>
  z
    .string()
    .trim()
    .max(max)
    .regex(/^\P{Cc}*$/u)
export const requiredLine = (max: number) => line(max).min(1)
/** Text of several lines. */
export const note = (max: number) =>
  z
    .string()
    .trim()
    .max(max)
    .regex(/^[\P{Cc}\n\t]*$/u)
export const reason = note(500).min(3)
/** A picture as the browser makes it, of at most about 200 kB. */
export const pngDataUrl = z
  .string()
  .max(280_000)
  .regex(/^data:image\/png;base64,[A-Za-z0-9+/]+=*$/)
/** A secret that the client made: 128 random bits or more, base64url. */
export const token = z.string().regex(/^[A-Za-z0-9_-]{22,64}$/)

/** Paging, search and sort of a list, as they stand in the URL. */
export const listQuery = <Sort extends readonly [string, ...string[]]>(sorts: Sort) =>
  z.object({
    search: z.string().trim().max(80).default(''),
    sort: z.enum(sorts).default(sorts[0] as Sort[number]),
    descending: z.stringbool().default(false),
    page: z.coerce.number().int().min(1).max(10_000).default(1),
    size: z.coerce.number().int().min(1).max(100).default(50),
  })

export const listAnswer = <Row extends z.ZodType>(row: Row) =>
  z.object({ rows: z.array(row), total: z.number().int() })
