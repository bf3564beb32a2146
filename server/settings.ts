import { mkdirSync } from 'node:fs'
import { resolve } from 'node:path'

/** What the process is told by its environment; scripts/start.mjs sets all of it. Read late, so that a build needs none. */
export interface Settings {
  databaseUrl: string
  dataFolder: string
  /** 32 bytes that wrap signing keys. */
  secret: Buffer
  origin: string
  smtpUrl: string
  mailFrom: string
  runsWeb: boolean
  runsWorker: boolean
  s3: { endpoint: string, bucket: string, region: string, accessKeyId: string, secretAccessKey: string } | null
}

let settings: Settings | undefined

function need(name: string): string {
  const value = process.env[name]
  if (!value) throw new Error(`${name} is not set. Start Smoothside by \`npm start\`, or see README.md, "Where the data lives".`)
  return value
}

/** The settings, checked; throws with the name of the one that is missing or too weak. */
export function useSettings(): Settings {
  if (settings) return settings
  const secret = Buffer.from(need('SMOOTHSIDE_SECRET'), 'hex')
  if (secret.length !== 32) throw new Error('SMOOTHSIDE_SECRET has to be 32 bytes in hex (64 characters).')
  if (need('NUXT_SESSION_PASSWORD').length < 32) throw new Error('NUXT_SESSION_PASSWORD has to be at least 32 characters long.')
  const role = process.env.SMOOTHSIDE_ROLE ?? 'both'
  if (!['web', 'worker', 'both'].includes(role)) throw new Error(`SMOOTHSIDE_ROLE is "${role}"; it may be web, worker or both.`)
  const dataFolder = resolve(need('SMOOTHSIDE_DATA'))
  mkdirSync(dataFolder, { recursive: true })
  settings = {
    databaseUrl: need('DATABASE_URL_APP'),
    dataFolder,
    secret,
    origin: need('SMOOTHSIDE_ORIGIN').replace(/\/$/, ''),
    smtpUrl: need('SMTP_URL'),
    mailFrom: process.env.MAIL_FROM ?? 'Smoothside <records@smoothside.example>',
    runsWeb: role !== 'worker',
    runsWorker: role !== 'web',
    s3: process.env.S3_ENDPOINT
      ? { endpoint: process.env.S3_ENDPOINT, bucket: need('S3_BUCKET'), region: process.env.S3_REGION ?? 'us-east-1', accessKeyId: need('S3_ACCESS_KEY_ID'), secretAccessKey: need('S3_SECRET_ACCESS_KEY') }
      : null,
  }
  return settings
}
