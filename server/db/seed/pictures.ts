import { crc32, deflateSync } from 'node:zlib'
import type { Chance } from './chance'

type Point = readonly [number, number]

/** A black-on-white PNG of a few strokes, for pictures that the demo shop needs and nobody took. */
export function strokesPng(
  width: number,
  height: number,
  strokes: readonly (readonly Point[])[],
  thickness = 2,
): Buffer {
  const stride = Math.ceil(width / 8)
  const pixels = Buffer.alloc((stride + 1) * height, 0xff)
  for (let y = 0; y < height; y += 1) pixels[y * (stride + 1)] = 0
  const ink = (x: number, y: number) => {
    if (x < 0 || y < 0 || x >= width || y >= height) return
    const at = y * (stride + 1) + 1 + (x >> 3)
    pixels[at] = pixels[at]! & ~(0x80 >> (x & 7))
  }
  for (const stroke of strokes) {
    for (let i = 1; i < stroke.length; i += 1) drawLine(stroke[i - 1]!, stroke[i]!, thickness, ink)
  }
  const header = Buffer.alloc(13)
  header.writeUInt32BE(width, 0)
  header.writeUInt32BE(height, 4)
  header.set([1, 0, 0, 0, 0], 8)
  const signature = Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a])
  return Buffer.concat([
    signature,
    chunk('IHDR', header),
    chunk('IDAT', deflateSync(pixels)),
    chunk('IEND', Buffer.alloc(0)),
  ])
}

function drawLine([x0, y0]: Point, [x1, y1]: Point, thickness: number, ink: (x: number, y: number) => void) {
  const steps = Math.max(1, Math.ceil(Math.hypot(x1 - x0, y1 - y0)))
  for (let step = 0; step <= steps; step += 1) {
    const [x, y] = [x0 + ((x1 - x0) * step) / steps, y0 + ((y1 - y0) * step) / steps].map(Math.round) as [
      number,
      number,
    ]
    for (let dx = 0; dx < thickness; dx += 1) for (let dy = 0; dy < thickness; dy += 1) ink(x + dx, y + dy)
  }
}

function chunk(type: string, data: Buffer): Buffer {
  const body = Buffer.concat([Buffer.from(type, 'latin1'), data])
  const framed = Buffer.alloc(body.length + 8)
  framed.writeUInt32BE(data.length, 0)
  body.copy(framed, 4)
  framed.writeUInt32BE(crc32(body), body.length + 4)
  return framed
}

/** A scribble that looks signed. */
export function scribble(chance: Chance): Buffer {
  const loops = chance.int(4, 7)
  const stroke: Point[] = []
  for (let t = 0; t <= loops * 12; t += 1) {
    const turn = (t / 12) * 2 * Math.PI
    stroke.push([
      24 + t * (250 / (loops * 12)) + 12 * Math.sin(turn),
      50 - (14 + 8 * Math.sin(t / 9)) * Math.cos(turn),
    ])
  }
  return strokesPng(320, 96, [stroke], 3)
}

/** What the forward-pressure window of an invented binding looks like when it is right: the pointer between two edges. */
export function windowPicture(pointerAt: number): Buffer {
  const box = (x: number, y: number, w: number, h: number): Point[] => [
    [x, y],
    [x + w, y],
    [x + w, y + h],
    [x, y + h],
    [x, y],
  ]
  const x = 80 + pointerAt * 160
  return strokesPng(
    320,
    140,
    [
      box(10, 20, 300, 100),
      box(70, 45, 180, 50),
      [
        [110, 45],
        [110, 95],
      ],
      [
        [210, 45],
        [210, 95],
      ],
      [
        [x - 9, 48],
        [x + 9, 48],
        [x + 9, 70],
        [x, 88],
        [x - 9, 70],
        [x - 9, 48],
      ],
    ],
    3,
  )
}
