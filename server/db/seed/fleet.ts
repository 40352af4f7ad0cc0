import { labelFor } from '#shared/labels/labels'
import { trackPlan } from '#shared/track/trackPlan'
import type { TrackModel } from '#shared/track/trackModel'
import { bindingModels, boots, labels, skiModels, skiPairs, skis } from '../schema/schema'
import type { Chance } from './chance'
import { windowPicture } from './pictures'
import type { Rows } from './rows'
import { demoTrackModels } from './trackModels'

export interface DemoPair {
  id: string
  code: string
  skiIds: { left: string; right: string }
  track: TrackModel
  bindingModelId: string
  bindingName: string
  accepts: string[]
  lengthCm: number
  siteId: string
  rackPlace: string
  preset: { toe: number; heel: number; turns: number | null }
  presetVersion: number
  itemSeq: number
  state: string
  since: Date
  freeFrom: number
}

export interface DemoBoots {
  id: string
  code: string
  mondo: number
  soleLengthMm: number
  soleType: string
  siteId: string
  rackPlace: string
  itemSeq: number
  state: string
  since: Date
  freeFrom: number
}

export interface DemoFleet {
  pairs: DemoPair[]
  boots: DemoBoots[]
}

type TrackKey = keyof typeof demoTrackModels

/** How the invented fleet is made up: which track stands on which ski, how many, how long. */
const lines: {
  track: TrackKey
  ski: string
  waistMm: number
  junior: boolean
  pairs: number
  lengths: [number, number, number]
  accepts: string[]
  refuses: string[]
  brakeMm: number
}[] = [
  {
    track: 'ladder-16',
    ski: 'Fellwind 74',
    waistMm: 74,
    junior: false,
    pairs: 220,
    lengths: [149, 184, 7],
    accepts: ['ISO 5355 A', 'ISO 23223'],
    refuses: ['ISO 9523', 'ISO 5355 C'],
    brakeMm: 85,
  },
  {
    track: 'ladder-12-s',
    ski: 'Corrie 80',
    waistMm: 80,
    junior: false,
    pairs: 120,
    lengths: [156, 184, 7],
    accepts: ['ISO 5355 A', 'ISO 23223'],
    refuses: ['ISO 9523', 'ISO 5355 C'],
    brakeMm: 90,
  },
  {
    track: 'twinrow-21',
    ski: 'Merle 70',
    waistMm: 70,
    junior: false,
    pairs: 90,
    lengths: [142, 170, 7],
    accepts: ['ISO 5355 A'],
    refuses: ['ISO 9523', 'ISO 5355 C'],
    brakeMm: 80,
  },
  {
    track: 'pebble-20',
    ski: 'Wren 66',
    waistMm: 66,
    junior: true,
    pairs: 120,
    lengths: [80, 140, 10],
    accepts: ['ISO 5355 C', 'ISO 5355 A'],
    refuses: ['ISO 9523'],
    brakeMm: 78,
  },
]

/** The fleet of the demo shop, new at the start of last season: everything racked, presets where common soles stand. */
export function demoFleet(
  rows: Rows,
  chance: Chance,
  shop: { shopId: string; siteIds: [string, string]; season: number; since: Date },
): DemoFleet & { modelIds: string[] } {
  const pairs: DemoPair[] = []
  const modelIds: string[] = []
  let number = 101
  for (const line of lines) {
    const track = demoTrackModels[line.track] as TrackModel
    const skiModelId = chance.uuid()
    const bindingModelId = chance.uuid()
    modelIds.push(bindingModelId)
    rows.add(skiModels, {
      id: skiModelId,
      shopId: shop.shopId,
      name: line.ski,
      waistMm: line.waistMm,
      offsetMm: 0,
      junior: line.junior,
      createdAt: shop.since,
    })
    rows.add(bindingModels, {
      id: bindingModelId,
      shopId: shop.shopId,
      name: line.track,
      track,
      accepts: line.accepts,
      refuses: line.refuses,
      brakeMm: line.brakeMm,
      manualDocument: `Workshop manual ${line.track} (invented)`,
      manualEdition: '4',
      manualPage: String(chance.int(9, 30)),
      windowNote: 'Boot clicked in: the pointer stands between the two edges.',
      windowPicture: windowPicture(0.5),
      windowPictureType: 'image/png',
      createdAt: shop.since,
    })
    for (let i = 0; i < line.pairs; i += 1) {
      const [shortest, longest, step] = line.lengths
      const pair: DemoPair = {
        id: chance.uuid(),
        code: `S${number}`,
        skiIds: { left: chance.uuid(), right: chance.uuid() },
        track,
        bindingModelId,
        bindingName: line.track,
        accepts: line.accepts,
        lengthCm: shortest + step * chance.int(0, (longest - shortest) / step),
        siteId: shop.siteIds[chance.happens(0.7) ? 0 : 1],
        rackPlace: `${'ABCDEF'[Math.floor((number - 101) / 95)]} ${String(((number - 101) % 95) + 1).padStart(2, '0')}`,
        preset: { toe: 0, heel: 0, turns: null },
        presetVersion: 1,
        itemSeq: 1,
        state: 'racked',
        since: shop.since,
        freeFrom: 0,
      }
      pair.preset = commonPreset(track, chance)
      number += 1
      pairs.push(pair)
      rows.add(skiPairs, {
        id: pair.id,
        shopId: shop.shopId,
        code: pair.code,
        state: 'racked',
        stateSince: shop.since,
        homeSiteId: pair.siteId,
        siteId: pair.siteId,
        rackPlace: pair.rackPlace,
        skiModelId,
        bindingModelId,
        lengthCm: pair.lengthCm,
        season: shop.season - chance.int(0, 2),
        createdAt: shop.since,
      })
      for (const side of ['left', 'right'] as const) {
        rows.add(skis, {
          id: pair.skiIds[side],
          shopId: shop.shopId,
          skiPairId: pair.id,
          side,
          toeCorrection: 0,
          heelCorrection: 0,
        })
        rows.add(labels, {
          id: chance.uuid(),
          shopId: shop.shopId,
          text: labelFor(pair.code, side),
          itemKind: 'ski_pair',
          itemId: pair.id,
          side,
          since: shop.since,
        })
      }
    }
  }
  return { pairs, boots: demoBoots(rows, chance, shop), modelIds }
}

/** A preset that some common sole length left behind. */
function commonPreset(track: TrackModel, chance: Chance) {
  for (;;) {
    const plan = trackPlan(track, chance.int(track.soleLengthMm.min + 10, track.soleLengthMm.max - 30))
    if (plan.ok) return { toe: plan.toe, heel: plan.heel, turns: plan.turns === null ? null : 0 }
  }
}

function demoBoots(
  rows: Rows,
  chance: Chance,
  shop: { shopId: string; siteIds: [string, string]; season: number; since: Date },
): DemoBoots[] {
  const made: DemoBoots[] = []
  for (let number = 101; number <= 750; number += 1) {
    const junior = number <= 280
    const shell = junior
      ? chance.int(16, 22)
      : Math.min(
          30,
          Math.max(22, Math.round(26.2 + 2 * (chance.next() + chance.next() + chance.next() - 1.5))),
        )
    const boot: DemoBoots = {
      id: chance.uuid(),
      code: `B${number}`,
      mondo: shell * 10 + (chance.happens(0.5) ? 5 : 0),
      soleLengthMm: shell * 10 + (junior ? 42 : 45),
      soleType: junior ? 'ISO 5355 C' : chance.happens(0.25) ? 'ISO 23223' : 'ISO 5355 A',
      siteId: shop.siteIds[chance.happens(0.7) ? 0 : 1],
      rackPlace: `${'KLMNOP'[Math.floor((number - 101) / 110)]} ${String(((number - 101) % 110) + 1).padStart(2, '0')}`,
      itemSeq: 1,
      state: 'racked',
      since: shop.since,
      freeFrom: 0,
    }
    made.push(boot)
    rows.add(boots, {
      id: boot.id,
      shopId: shop.shopId,
      code: boot.code,
      state: 'racked',
      stateSince: shop.since,
      homeSiteId: boot.siteId,
      siteId: boot.siteId,
      rackPlace: boot.rackPlace,
      model: junior ? 'Burrow junior' : chance.pick(['Hollin 80', 'Hollin 100']),
      mondo: boot.mondo,
      soleLengthMm: boot.soleLengthMm,
      soleType: boot.soleType,
      season: shop.season - chance.int(0, 3),
      createdAt: shop.since,
    })
    for (const side of ['left', 'right'] as const) {
      rows.add(labels, {
        id: chance.uuid(),
        shopId: shop.shopId,
        text: labelFor(boot.code, side),
        itemKind: 'boots',
        itemId: boot.id,
        side,
        since: shop.since,
      })
    }
  }
  return made
}
