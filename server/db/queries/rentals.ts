import { and, asc, desc, eq, inArray, sql, type SQL } from 'drizzle-orm'
import { alias } from 'drizzle-orm/pg-core'
import type { AnswerOf } from '#shared/api/define'
import type { listRentals, RentalRow } from '#shared/api/rentals'
import type { RentalState } from '#shared/lifecycle/fittingStates'
import { ageOnFirstDay } from '#shared/renters/formRules'
import type { Reader } from '../../deps'
import { fittingInputs, people, rentals, renters, shops } from '../schema/schema'
import { contains, iso } from './lists'

const mostRows = 100
const clerk = alias(people, 'clerk')

type Asked = { show: 'here' | 'waiting' | 'out' | 'all'; search: string; site: string }

const shown: Record<Asked['show'], RentalState[]> = {
  here: ['waiting', 'open'],
  waiting: ['waiting'],
  out: ['out'],
  all: ['waiting', 'open', 'out', 'returned', 'cancelled'],
}

export const rentalColumns = {
  id: rentals.id,
  number: rentals.number,
  state: rentals.state,
  name: sql<string>`trim(${renters.firstName} || ' ' || ${renters.lastName})`,
  siteId: rentals.siteId,
  startsOn: rentals.startsOn,
  endsOn: rentals.endsOn,
  arrivedAt: rentals.arrivedAt,
  promisedAt: rentals.promisedAt,
  takenBy: clerk.name,
  birthDate: renters.birthDate,
  age: fittingInputs.age,
  ageOfMajority: shops.ageOfMajority,
  fitting: sql<
    RentalRow['fitting']
  >`(select jsonb_build_object('id', f.id, 'number', f.number, 'state', f.state, 'skiPair', p.code)
    from fittings f join ski_pairs p on p.id = f.ski_pair_id where f.rental_id = ${rentals.id} order by f.number desc limit 1)`,
  out: sql<number>`(select count(*)::int from rental_items i where i.rental_id = ${rentals.id} and i.back_at is null)`,
}

interface Selected {
  state: string
  startsOn: string
  arrivedAt: Date
  promisedAt: Date
  birthDate: string | null
  age: number | null
  ageOfMajority: number
}

/** A row as it travels. A minor is under the shop's age of majority on the first day: the guardian signs. */
export function rentalRow<R extends Selected>({ birthDate, age, ageOfMajority, ...row }: R) {
  return {
    ...row,
    state: row.state as RentalState,
    arrivedAt: iso(row.arrivedAt),
    promisedAt: iso(row.promisedAt),
    minor: (ageOnFirstDay({ birthDate, age }, row.startsOn) ?? ageOfMajority) < ageOfMajority,
  }
}

/** A short number of today, an item's code or label, else a part of a name or a phone number. */
function matches(search: string): SQL {
  if (/^\d{1,3}$/.test(search)) return sql`${rentals.number} = ${Number(search)}`
  const [, code] = /^([SB]\d{1,5})(?:[LR].?)?$/i.exec(search.replaceAll(/[\s-]/g, '')) ?? []
  if (code) {
    return sql`exists (select from (select id from ski_pairs where shop_id = ${rentals.shopId} and code = ${code.toUpperCase()}
      union all select id from boots where shop_id = ${rentals.shopId} and code = ${code.toUpperCase()}) item
      where exists (select from rental_items i where i.rental_id = ${rentals.id} and i.item_id = item.id)
        or exists (select from fittings f where f.rental_id = ${rentals.id} and item.id in (f.ski_pair_id, f.boots_id)))`
  }
  const digits = search.replaceAll(/\D/g, '')
  const names = sql`(${renters.firstName} || ' ' || ${renters.lastName} || ' ' || ${renters.firstName}) ilike ${contains(search)}`
  if (digits.length < 3) return names
  return sql`(${names} or regexp_replace(coalesce(${renters.phone}, '') || ' ' || coalesce(${renters.guardianPhone}, ''), '\\D', '', 'g') like ${contains(digits)})`
}

/** People at the shop by promised time, people away by the day they are due; what is over, newest first. */
export async function rentalList(
  db: Reader,
  shopId: string,
  { show, search, site }: Asked,
): Promise<AnswerOf<typeof listRentals>> {
  const order =
    show === 'out'
      ? [asc(rentals.endsOn), asc(rentals.promisedAt)]
      : show === 'all'
        ? [desc(rentals.arrivedAt)]
        : [asc(rentals.promisedAt), asc(rentals.number)]
  const rows = await db
    .select(rentalColumns)
    .from(rentals)
    .innerJoin(renters, eq(renters.id, rentals.renterId))
    .innerJoin(shops, eq(shops.id, rentals.shopId))
    .leftJoin(fittingInputs, eq(fittingInputs.id, renters.currentInputsId))
    .leftJoin(clerk, eq(clerk.id, rentals.takenBy))
    .where(
      and(
        eq(rentals.shopId, shopId),
        inArray(rentals.state, shown[show]),
        site ? eq(rentals.siteId, site) : undefined,
        search ? matches(search) : undefined,
      ),
    )
    .orderBy(...order)
    .limit(mostRows + 1)
  return { rows: rows.slice(0, mostRows).map(rentalRow), more: rows.length > mostRows }
}
