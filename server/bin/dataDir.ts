import { randomBytes } from 'node:crypto'
import fs from 'node:fs'
import path from 'node:path'

/** Makes the folder of the data; refuses one that this user may not write in, before anything half-works. */
export function makeDataDir(dataDir: string) {
  try {
    fs.mkdirSync(dataDir, { recursive: true })
    fs.accessSync(dataDir, fs.constants.W_OK | fs.constants.X_OK)
    const cluster = path.join(dataDir, 'postgres')
    if (fs.existsSync(cluster)) fs.accessSync(cluster, fs.constants.R_OK)
  } catch {
    throw new Error(
      `This user may not use the data folder ${dataDir}. Start as the user who made it, or give another one: NOTCHWISE_DATA=/a/folder npm start.`,
    )
  }
}

/** The secret that signs sessions: made once, kept beside the data, readable by its owner only. */
export function sessionSecret(dataDir: string): string {
  const file = path.join(dataDir, 'session.secret')
  if (!fs.existsSync(file))
    fs.writeFileSync(file, randomBytes(32).toString('base64url'), { mode: 0o600, flag: 'wx' })
  const secret = fs.readFileSync(file, 'utf8').trim()
  if (secret.length < 32)
    throw new Error(`${file} holds a weak secret. Remove the file: a strong one is made at the next start.`)
  return secret
}
