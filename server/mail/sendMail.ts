import type { Transporter } from 'nodemailer'
import { createTransport } from 'nodemailer'
import { useSettings } from '../settings'
import { Failure } from '../services/failure'

export interface Mail {
  to: { name: string, address: string }
  subject: string
  text: string
  html: string
  attachments?: { filename: string, content: Buffer, contentType: string }[]
}

let transport: Transporter | undefined

/** Hands a mail to the mail server; resolves with its answer, refuses where it cannot be reached or says no for now (4xx). */
export async function sendMail(mail: Mail): Promise<{ response: string }> {
  transport ??= createTransport(useSettings().smtpUrl, { connectionTimeout: 10_000, greetingTimeout: 10_000, socketTimeout: 30_000 } as never)
  try { return { response: (await transport.sendMail({ from: useSettings().mailFrom, ...mail })).response ?? '' } }
  catch (cause) {
    const code = (cause as { responseCode?: number }).responseCode ?? 0
    if (code >= 500) throw new Failure('invalid', `The mail server refused this address (${code}). Check it with the person.`)
    throw new Failure('mailDown', 'The mail server does not answer. Nothing is lost; try again in a few minutes.')
  }
}
