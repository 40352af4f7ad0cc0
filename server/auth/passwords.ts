import { hash, verify } from '@node-rs/argon2'
import { Problem } from '../errors'

/** Argon2id with the library's defaults (19 MiB, 2 passes, the OWASP minimum); hashing threads are few. */
const waiting: (() => void)[] = []
let free = 2

/** Sign-ins that may wait their turn; at about 20 ms a hash the last of them waits a second. */
const mayWait = 100

/**
 * At most two hashes at a time: a flood of sign-ins waits here and leaves the scans alone. Throws request.too_many
 * when too many wait already.
 */
async function bounded<T>(work: () => Promise<T>): Promise<T> {
  if (waiting.length >= mayWait) throw new Problem('request.too_many')
  if (free === 0) await new Promise<void>((go) => waiting.push(go))
  else free -= 1
  try {
    return await work()
  } finally {
    const next = waiting.shift()
    if (next) next()
    else free += 1
  }
}

/** Argon2id hash of a password or of six digits. */
export const hashSecret = (secret: string) => bounded(() => hash(secret))

let nobody: Promise<string> | undefined

/**
 * Whether the secret fits. Without a hash (null, or empty before a first password was set) it takes as long and says
 * no, so that unknown people cannot be told from known ones.
 */
export async function secretFits(secret: string, hashed: string | null): Promise<boolean> {
  nobody ??= hash('nobody has this secret')
  const against = hashed || (await nobody)
  const fits = await bounded(() => verify(against, secret))
  return Boolean(hashed) && fits
}
