import type { AnswerOf, BodyOf } from '#shared/api/define'
import { claimFitting } from '#shared/api/fittings'
import { getHandOver, recordHandOver } from '#shared/api/handOvers'
import { signRecord } from '#shared/api/records'
import { readOwnBoots } from '#shared/api/rentals'
import { getTicket, readSki } from '#shared/api/tickets'
import type { SeenReading } from '#shared/schemas/records'
import { staff, type Who } from './people'
import type { TestShop } from './shop'
import type { RentalValues, TestRental } from './rentals'
import type { Side, TestBoots, TestPair, Track } from './things'

export interface TestTicket {
  fittingId: string
  rental: TestRental
  pair: TestPair
  /** Null: the renter's own. */
  boots: TestBoots | null
}

/** A renter of 78 kg with boots and a pair claimed for them, by the commands of the desk. */
export async function newTicket(
  shop: TestShop,
  { track = 'ladder-16', own = false, ...values }: RentalValues & { track?: Track; own?: boolean } = {},
): Promise<TestTicket> {
  const [rental, pair] = [await shop.rental({ ...values, ownBoots: own }), await shop.rackedPair(track)]
  const boots = own ? null : await shop.rackedBoots()
  if (own) {
    await shop.as('head_technician').send(readOwnBoots, {
      rentalId: rental.id,
      description: 'own pair (invented)',
      soleLengthMm: 305,
      soleType: 'ISO 5355 A',
      wear: 'sound',
    })
  }
  const body = { rentalId: rental.id, skiPairId: pair.id, bootsId: boots?.id ?? null }
  const { ids, code } = await shop.as('counter').send(claimFitting, body)
  if (code) throw new Error(`not claimed: ${code}`)
  return { fittingId: ids.fittingId, rental, pair, boots }
}

export const ticketOf = async (shop: TestShop, fittingId: string) =>
  (await shop.as('technician').get<AnswerOf<typeof getTicket>>(getTicket.path.replace(':id', fittingId))).body

/** What a ski shows that was set exactly, with what is told to differ. */
export async function readingOf(
  shop: TestShop,
  fittingId: string,
  side: Side,
  differs: Partial<SeenReading> = {},
): Promise<BodyOf<typeof readSki>> {
  const { fitting } = await ticketOf(shop, fittingId)
  const { track, targets, skiPair } = fitting
  return {
    fittingId,
    side,
    presetVersion: skiPair.skis[side].presetVersion,
    reading: {
      toe: track.toe,
      heel: track.heel,
      turns: track.turns,
      toeValue: targets[side].toe,
      heelValue: targets[side].heel,
      soleClearance: true,
      forwardPressure: true,
      brake: true,
      function: true,
      ...differs,
    },
  }
}

/** Reads a ski back at the bench. */
export async function read(
  shop: TestShop,
  fittingId: string,
  side: Side,
  { who = 'technician', ...differs }: Partial<SeenReading> & { who?: Who } = {},
) {
  return shop.as(who).send(readSki, await readingOf(shop, fittingId, side, differs))
}

const benches = new Map<TestShop, Map<Who, ReturnType<TestShop['enrol']>>>()

/** A person's own enrolled bench: only one person at a time is signed in at a device. */
export function benchOf(shop: TestShop, who: Who = 'technician') {
  const ofShop = benches.get(shop) ?? new Map<Who, ReturnType<TestShop['enrol']>>()
  benches.set(shop, ofShop)
  const bench = ofShop.get(who) ?? shop.enrol('bench')
  ofShop.set(who, bench)
  return bench
}

/** Signs at the person's bench, by PIN. */
export async function sign(
  shop: TestShop,
  fittingId: string,
  { who = 'technician', pin = staff[who].pin }: { who?: Who; pin?: string } = {},
) {
  return shop.as(who, await benchOf(shop, who)).send(signRecord, { fittingId }, { pin })
}

/** A ticket that is read and signed: it waits for its hand-over. */
export async function signedTicket(shop: TestShop, of: Parameters<typeof newTicket>[1] = {}) {
  const ticket = await newTicket(shop, of)
  await read(shop, ticket.fittingId, 'left')
  await read(shop, ticket.fittingId, 'right')
  const { ids, code } = await sign(shop, ticket.fittingId)
  if (code) throw new Error(`not signed: ${code}`)
  return { ...ticket, recordId: ids.recordId }
}

/** The smallest picture there is: one transparent dot. */
export const signaturePng =
  'data:image/png;base64,iVBORw0KGgoAAAANSUhEUgAAAAEAAAABCAYAAAAfFcSJAAAADUlEQVR42mNk+M9QDwADhgGAWjR9awAAAABJRU5ErkJggg=='

export const labelsOf = ({ pair, boots }: Pick<TestTicket, 'pair' | 'boots'>) => [
  pair.skis.left.label,
  pair.skis.right.label,
  ...(boots ? [boots.labels.left, boots.labels.right] : []),
]

/** What the hand-over screen sends for a ticket, with what is told to differ. */
export async function handOverBody(
  shop: TestShop,
  ticket: TestTicket,
  differs: Partial<BodyOf<typeof recordHandOver>> = {},
): Promise<BodyOf<typeof recordHandOver>> {
  const { body } = await shop
    .as('counter')
    .get<AnswerOf<typeof getHandOver>>(getHandOver.path.replace(':id', ticket.fittingId))
  return {
    fittingId: ticket.fittingId,
    labels: labelsOf(ticket),
    signaturePng,
    signedName: 'Jara Heath',
    signedAs: 'renter',
    textId: body.text!.id,
    ...(ticket.boots ? {} : { soleLengthReadMm: 305 }),
    ...differs,
  }
}

export const handOver = async (
  shop: TestShop,
  ticket: TestTicket,
  differs: Partial<BodyOf<typeof recordHandOver>> = {},
  who: Who = 'counter',
) => shop.as(who).send(recordHandOver, await handOverBody(shop, ticket, differs))
