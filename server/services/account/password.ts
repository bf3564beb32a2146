import { Hash } from '@adonisjs/hash'
import { Scrypt } from '@adonisjs/hash/drivers/scrypt'

// The scrypt of nuxt-auth-utils, taken from its own library so that services and scripts run outside Nitro too.
const hash = new Hash(new Scrypt({}))

export const hashPassword = (password: string) => hash.make(password)
export const verifyPassword = (stored: string, password: string) => hash.verify(stored, password)
