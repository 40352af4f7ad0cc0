import { Problem } from '../errors'

const kinds = [
  { type: 'image/png', starts: Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]) },
  { type: 'image/jpeg', starts: Buffer.from([0xff, 0xd8, 0xff]) },
]

/** The bytes of a picture from a data URL; its type is what its content says, not what the URL claims. */
export function imageFromDataUrl(url: string): { bytes: Buffer; type: string } {
  const bytes = Buffer.from(url.slice(url.indexOf(',') + 1), 'base64')
  const kind = kinds.find(({ starts }) => bytes.subarray(0, starts.length).equals(starts))
  if (!kind) throw new Problem('request.malformed')
  return { bytes, type: kind.type }
}
