import { z } from 'zod'
import { editionNames, rowCodes } from '#shared/release/selectionTable'
import { id, instant, requiredLine } from '#shared/schemas/common'
import { command, read } from './define'

const band = z.object({ min: z.number().nullable(), max: z.number().nullable() })
const standing = z.object({ kind: z.string(), source: z.string() })

/** What a head technician said of the edition in use. */
export const tableApproval = z.discriminatedUnion('approved', [
  z.object({ approved: z.literal(true), by: z.string(), at: instant, comparedWith: z.string() }),
  z.object({
    approved: z.literal(false),
    /** Who withdrew it last; null when nobody ever signed it. */
    withdrawn: z.object({ by: z.string(), at: instant, reason: z.string() }).nullable(),
  }),
])
export type TableApproval = z.infer<typeof tableApproval>

/** The whole table as it computes, every row and column with where it comes from, to be compared on paper. */
export const getTableEdition = read({
  path: '/api/table-edition',
  access: 'fittings.read',
  answer: z.object({
    edition: z.enum(editionNames),
    rulesVersion: z.string(),
    approval: tableApproval,
    standing,
    columns: z.array(band),
    rows: z.array(
      z.object({
        code: z.enum(rowCodes),
        massKg: band.nullable(),
        massLb: band.nullable(),
        heightCm: band.nullable(),
        heightIn: band.nullable(),
        values: z.array(z.number().nullable()),
        twistNm: z.number(),
        forwardLeanNm: z.number(),
        bandsFrom: standing,
        torquesFrom: standing,
      }),
    ),
    exceptions: z.array(z.object({ row: z.enum(rowCodes), column: z.int(), standing })),
    rules: z.array(z.object({ rule: z.string(), standing })),
  }),
})

/** Signed: compared, cell by cell, with the standard that the shop owns. For this edition and these rules only. */
export const approveTableEdition = command({
  kind: 'tableEdition.approve',
  path: '/api/table-edition/approve',
  access: 'tableEdition.approve',
  body: z.strictObject({
    edition: z.enum(editionNames),
    rulesVersion: z.string().max(40),
    comparedWith: requiredLine(200).min(3),
  }),
  ids: z.object({ approvalId: id }),
})

/** From now on every value prints again that this shop did not approve it. */
export const withdrawTableEdition = command({
  kind: 'tableEdition.withdraw',
  path: '/api/table-edition/withdraw',
  access: 'tableEdition.approve',
  body: z.strictObject({ edition: z.enum(editionNames), reason: requiredLine(200).min(3) }),
  ids: z.object({ approvalId: id }),
})
