import { createHash, randomBytes } from 'node:crypto'

/** 160 random bits, base64url: for links and devices. Only the hash is kept. */
export const newToken = () => randomBytes(20).toString('base64url')
export const tokenHash = (token: string) => createHash('sha256').update(token).digest()
