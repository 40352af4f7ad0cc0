import { createHash } from 'node:crypto'
import { sql } from 'drizzle-orm'
import type { PgTable } from 'drizzle-orm/pg-core'
import { hashSecret } from '../../auth/passwords'
import { defaultTexts } from '../../services/defaultTexts'
import type { Tx } from '../../deps'
import { openDb } from '../client'
import * as tables from '../schema/schema'
import { chanceFrom } from './chance'
import { dayFrom, zone } from './days'
import { demoFleet, type DemoFleet } from './fleet'
import { addMorning } from './morning'
import { demoDomain, demoStaff } from './people'
import { Rows } from './rows'
import { addSeason } from './season'
import type { DemoShop } from './visits'

export interface DemoSignIn {
  role: string
  email: string
  password: string
  pin: string
}

/** The sign-ins of the demo shop, for the start command's line and the demo's sign-in page. */
export const demoSignIns: DemoSignIn[] = demoStaff.map(({ key, roles, password, pin }) => ({
  role: roles.join(', '),
  email: `${key}@${demoDomain}`,
  password,
  pin,
}))

/**
 * Fills an empty demo database: Tarnside Hire with two sites, a fleet, last season, and the morning up to `now`.
 * The same seed and moment give the same data. A shop that is already there is left alone.
 */
export async function seedDemo({
  ownerUrl,
  today,
  seed = 417,
}: {
  ownerUrl: string
  today: Date
  seed?: number
}): Promise<{ signIns: DemoSignIn[] }> {
  const { db, close } = openDb(ownerUrl, { max: 1 })
  try {
    const filled = await db.transaction(async (tx) => {
      await tx.execute(sql`select pg_advisory_xact_lock(724002)`)
      if ((await tx.$count(tables.shops)) > 0) return false
      await fill(tx, today, seed, await hashes())
      return true
    })
    if (filled) await db.execute(sql`analyze`)
    return { signIns: demoSignIns }
  } finally {
    await close()
  }
}

async function hashes() {
  return Promise.all(
    demoStaff.map(async ({ password, pin }) => ({
      password: await hashSecret(password),
      pin: await hashSecret(pin),
    })),
  )
}

async function fill(tx: Tx, now: Date, seed: number, staffHashes: { password: string; pin: string }[]) {
  const chance = chanceFrom(seed)
  const rows = new Rows()
  const shopId = chance.uuid()
  const siteIds: [string, string] = [chance.uuid(), chance.uuid()]
  const since = new Date(Date.parse(`${dayFrom(now, -400)}T08:00:00Z`))
  rows.add(tables.shops, {
    id: shopId,
    name: 'Tarnside Hire',
    zone,
    locale: 'en',
    demo: true,
    createdAt: since,
  })
  for (const [index, name] of ['Lower Lift', 'Village Square'].entries()) {
    rows.add(tables.sites, { id: siteIds[index], shopId, name, createdAt: new Date(since.getTime() + index) })
  }
  const staff = addStaff(rows, chance.uuid, shopId, since, staffHashes)
  const textIds = addTexts(rows, chance.uuid, shopId, since)
  const season = Number(dayFrom(now, -300).slice(0, 4))
  const fleet = demoFleet(rows, chance, { shopId, siteIds, season, since })
  await rows.write(tx, [
    tables.shops,
    tables.sites,
    tables.people,
    tables.memberships,
    tables.shopTexts,
    tables.skiModels,
    tables.bindingModels,
  ])
  await approveModels(tx, shopId, staff.head!, since)

  const shop: DemoShop = { shopId, staff, ...textIds, numbers: { fitting: 0, day: new Map() } }
  addOpeningChanges(rows, chance.uuid, shop, fleet, since)
  addSeason(rows, chance, shop, fleet, siteIds, now)
  addMorning({ rows, chance, shop, fleet, siteIds, now })
  await writeFacts(tx, rows)
  await tx.insert(tables.shopSequences).values({ shopId, seq: 0, lastFittingNumber: shop.numbers.fitting })
  for (const [day, last] of shop.numbers.day) await tx.insert(tables.dayNumbers).values({ shopId, day, last })
}

function addStaff(
  rows: Rows,
  uuid: () => string,
  shopId: string,
  since: Date,
  staffHashes: { password: string; pin: string }[],
) {
  const staff: Record<string, string> = {}
  for (const [index, person] of demoStaff.entries()) {
    const id = uuid()
    staff[person.key] = id
    const { password, pin } = staffHashes[index]!
    rows.add(tables.people, {
      id,
      email: `${person.key}@${demoDomain}`,
      name: person.name,
      passwordHash: password,
      locale: person.locale,
      createdAt: since,
    })
    rows.add(tables.memberships, {
      shopId,
      personId: id,
      roles: person.roles,
      pinHash: pin,
      createdAt: since,
    })
  }
  return staff
}

function addTexts(rows: Rows, uuid: () => string, shopId: string, since: Date) {
  let [textId, textSha256] = ['', '']
  for (const { kind, locale, body } of defaultTexts()) {
    const id = uuid()
    const sha256 = createHash('sha256').update(body, 'utf8').digest('hex')
    if (kind === 'acknowledgement' && locale === 'en') [textId, textSha256] = [id, sha256]
    rows.add(tables.shopTexts, { id, shopId, kind, locale, version: 1, body, sha256, createdAt: since })
  }
  return { textId, textSha256 }
}

/** The demo's head technician signed the sheets of the four binding models. */
async function approveModels(tx: Tx, shopId: string, personId: string, since: Date) {
  await tx.execute(sql`
    insert into binding_model_approvals (shop_id, binding_model_id, content_sha256, person_id, occurred_at, recorded_at)
    select shop_id, id, content_sha256, ${personId}, ${since.toISOString()}::timestamptz, ${since.toISOString()}::timestamptz
    from binding_models where shop_id = ${shopId}`)
}

/** How every item came to its first rack, and every unit to its first preset. */
function addOpeningChanges(rows: Rows, uuid: () => string, shop: DemoShop, fleet: DemoFleet, since: Date) {
  const change = {
    shopId: shop.shopId,
    fromState: 'commissioning',
    toState: 'racked',
    reason: null,
    subjectId: null,
    personId: shop.staff.head,
    itemSeq: 1,
    occurredAt: since,
    recordedAt: since,
  }
  for (const { id, siteId, rackPlace, skiIds, preset } of fleet.pairs) {
    rows.add(tables.stateChanges, {
      ...change,
      id: uuid(),
      itemKind: 'ski_pair',
      itemId: id,
      siteId,
      rackPlace,
    })
    for (const skiId of [skiIds.left, skiIds.right]) {
      rows.add(tables.presetChanges, {
        id: uuid(),
        shopId: shop.shopId,
        skiId,
        presetToe: preset.toe,
        presetHeel: preset.heel,
        presetTurns: preset.turns,
        presetVersion: 1,
        toeCorrection: 0,
        heelCorrection: 0,
        reason: 'commissioning',
        fittingId: null,
        personId: shop.staff.head,
        occurredAt: since,
        recordedAt: since,
      })
    }
  }
  for (const { id, siteId, rackPlace } of fleet.boots)
    rows.add(tables.stateChanges, { ...change, id: uuid(), itemKind: 'boots', itemId: id, siteId, rackPlace })
}

const facts: PgTable[] = [
  tables.skiPairs,
  tables.skis,
  tables.boots,
  tables.labels,
  tables.renters,
  tables.fittingInputs,
  tables.rentals,
  tables.fittings,
  tables.presetChanges,
  tables.skiReadings,
  tables.ticketHolds,
  tables.fittingRecords,
  tables.fittingRecordParts,
  tables.handOvers,
  tables.signatures,
  tables.rentalItems,
  tables.returns,
  tables.inspections,
  tables.quarantines,
  tables.stateChanges,
  tables.callBacks,
  tables.callBackSteps,
]

/**
 * A whole season in one go: the triggers that project facts one by one are off while it is written, and the
 * projections are then made from the facts. Foreign keys and checks stay on.
 */
async function writeFacts(tx: Tx, rows: Rows) {
  const trigger = async (what: 'disable' | 'enable') => {
    for (const table of facts) await tx.execute(sql`alter table ${table} ${sql.raw(what)} trigger user`)
  }
  await tx.execute(sql`alter table renters drop constraint renters_current_inputs`)
  await tx.execute(sql`alter table fittings drop constraint fittings_record`)
  await trigger('disable')
  await rows.write(tx, facts)
  await project(tx)
  await trigger('enable')
  await tx.execute(
    sql`alter table renters add constraint renters_current_inputs foreign key (current_inputs_id) references fitting_inputs (id) on delete set null`,
  )
  await tx.execute(
    sql`alter table fittings add constraint fittings_record foreign key (record_id) references fitting_records (id)`,
  )
}

async function project(tx: Tx) {
  for (const table of ['ski_pairs', 'boots'] as const) {
    await tx.execute(sql`
      update ${sql.identifier(table)} i set state = c.to_state, state_since = c.occurred_at, site_id = c.site_id
      from (select distinct on (item_id) * from state_changes order by item_id, item_seq desc) c where c.item_id = i.id`)
  }
  await tx.execute(sql`
    update skis s set preset_toe = c.preset_toe, preset_heel = c.preset_heel, preset_turns = c.preset_turns, preset_read_at = c.occurred_at, preset_version = c.preset_version
    from (select distinct on (ski_id) * from preset_changes order by ski_id, preset_version desc) c where c.ski_id = s.id`)
  await tx.execute(sql`update fittings f set basis = fitting_basis(f)`)
  await tx.execute(
    sql`update fittings set inputs_hash = encode(sha256(convert_to(basis::text, 'UTF8')), 'hex')`,
  )
  await tx.execute(sql`
    update fitting_records r set inputs_hash = f.inputs_hash, binding_content_sha256 = m.content_sha256
    from fittings f, binding_models m where f.id = r.fitting_id and m.id = r.binding_model_id`)
}
