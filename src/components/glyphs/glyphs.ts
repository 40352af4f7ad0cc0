/** One stroke or shape of a glyph on a field of 24 by 24. `cut` is drawn in the colour of the ground. */
export interface GlyphPart {
  d: string
  as?: 'solid' | 'cut'
  width?: number
  dashes?: string
}

/** The notch that the life-cycle glyphs share: a pin in it, above it, or leaving it tells the state. */
const notch: GlyphPart = { d: 'M1.5 17.5H7V22h10v-4.5h5.5' }

export const glyphs = {
  // life of an item
  commissioning: [notch, { d: 'M8.6 3.5h6.8v6.8L12 14.6l-3.4-4.3z', dashes: '2.6 2' }],
  racked: [notch, { d: 'M8.5 4h7v11.4L12 20l-3.5-4.6z', as: 'solid' }],
  claimed: [notch, { d: 'M8.8 4.4h6.4v10.4L12 19l-3.2-4.2z' }],
  prepared: [notch, { d: 'M8.5 11h7v4.4L12 20l-3.5-4.6z', as: 'solid' }, { d: 'M6 4.5l4.4 4 8-7' }],
  out: [notch, { d: 'M12 18V3.5M6.5 9L12 3.2 17.5 9' }],
  unchecked: [notch, { d: 'M8.8 1.4h6.4v7L12 12.8 8.8 8.4z' }],
  service: [
    {
      d: 'M20.4 8.4a5.2 5.2 0 0 1-7 5.8l-6.6 7a2.3 2.3 0 0 1-3.4-3.3l6.9-6.7a5.2 5.2 0 0 1 6-7.3l-2.6 3.2 2.4 2.7z',
    },
  ],
  withdrawn: [notch, { d: 'M6.5 2.5l11 11m0-11l-11 11' }],
  under_test: [{ d: 'M2.5 19.5a9.5 9.5 0 0 1 19 0M12 19.5l5-8M2 22h20' }],
  lost: [notch, { d: 'M8.7 5.2a3.4 3.4 0 1 1 4.9 3c-1.2.6-1.6 1.2-1.6 2.4M12 12.2v2.4' }],
  quarantine: [
    { d: 'M8 1.5h8l6 6v9l-6 6H8l-6-6v-9z' },
    { d: 'M8.6 6.5h2.4v11H8.6zM13 6.5h2.4v11H13z', as: 'solid' },
  ],
  retired: [notch, { d: 'M4 9.5h16', width: 3 }],
  sold: [notch, { d: 'M5 9h12M12.5 4L18 9l-5.5 5' }],

  // how things stand
  done: [{ d: 'M3 12.5L9.5 19 21.5 5', width: 3.4 }],
  now: [
    { d: 'M12 .8L23.2 12 12 23.2.8 12z', as: 'solid' },
    { d: 'M12 6v7.2M12 15.6v2.6', as: 'cut', width: 2.6 },
  ],
  stop: [
    { d: 'M7.6 1h8.8L23 7.6v8.8L16.4 23H7.6L1 16.4V7.6z', as: 'solid' },
    { d: 'M5.5 12h13', as: 'cut', width: 3.6 },
  ],
  info: [{ d: 'M12 2a10 10 0 1 0 0 20 10 10 0 1 0 0-20z' }, { d: 'M12 10.5V18M12 5.7v2.6', width: 2.8 }],
  wait: [{ d: 'M5 2h14M5 22h14M7 2.5c0 6 4 6.5 4 9.5s-4 3.5-4 9.5M17 2.5c0 6-4 6.5-4 9.5s4 3.5 4 9.5' }],
  live: [
    { d: 'M12 8.6a3.4 3.4 0 1 0 0 6.8 3.4 3.4 0 1 0 0-6.8z', as: 'solid' },
    { d: 'M5.8 5.8a8.8 8.8 0 0 0 0 12.4M18.2 5.8a8.8 8.8 0 0 1 0 12.4' },
  ],
  stale: [{ d: 'M12 2a10 10 0 1 0 0 20 10 10 0 1 0 0-20z', dashes: '4.5 3.3' }, { d: 'M12 6v6.5l4 3' }],
  sound: [{ d: 'M3 9v6h4l6 5V4L7 9zM16.5 8.5a5 5 0 0 1 0 7M19.5 5.8a9 9 0 0 1 0 12.4' }],
  mute: [{ d: 'M3 9v6h4l6 5V4L7 9zM16.5 9.5l5 5m0-5l-5 5' }],
  delete: [{ d: 'M8 5h14v14H8l-6.5-7zM12 9l6 6M18 9l-6 6' }],
  undo: [{ d: 'M4 9h11a6 6 0 0 1 0 12H8M8.5 4L3.5 9l5 5' }],
  down: [{ d: 'M5.5 9l6.5 6.5L18.5 9', width: 3 }],
  up: [{ d: 'M5.5 15L12 8.5l6.5 6.5', width: 3 }],
  previous: [{ d: 'M15 5.5L8.5 12l6.5 6.5', width: 3 }],
  next: [{ d: 'M9 5.5l6.5 6.5L9 18.5', width: 3 }],
  close: [{ d: 'M5 5l14 14M19 5L5 19', width: 2.8 }],
  search: [{ d: 'M10 3a7 7 0 1 0 0 14 7 7 0 1 0 0-14zM15.2 15.2L22 22' }],
  print: [{ d: 'M6 8V2h12v6M6 17H2V8h20v9h-4M6 13h12v9H6z' }],
  person: [{ d: 'M12 3a4.5 4.5 0 1 0 0 9 4.5 4.5 0 1 0 0-9zM3.5 21.5c0-5 3.6-7 8.5-7s8.5 2 8.5 7' }],
} as const satisfies Record<string, readonly GlyphPart[]>

export type GlyphName = keyof typeof glyphs
