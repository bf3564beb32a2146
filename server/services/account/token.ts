import { createHash, randomBytes } from 'node:crypto'

/** 256 random bits for a cookie or a link. Only the hash is kept in the database. */
export const makeToken = () => randomBytes(32).toString('base64url')
export const hashToken = (token: string) => createHash('sha256').update(token).digest('hex')
