import { spawn, type ChildProcess } from 'node:child_process'
import fs from 'node:fs'
import http from 'node:http'
import os from 'node:os'
import path from 'node:path'
import { createTransport } from 'nodemailer'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'

const root = path.resolve(import.meta.dirname, '../../..')
const folder = fs.mkdtempSync(path.join(os.tmpdir(), 'smoothside-mail-'))
let catcher: ChildProcess
let page = ''
let smtp = 0

beforeAll(async () => {
  const child = spawn(process.execPath, [path.join(root, 'scripts/mailCatcher.mjs')], { env: { PATH: process.env.PATH, MAIL_CATCHER_FOLDER: folder, MAIL_CATCHER_UNKNOWN: 'nobody@y.example' }, stdio: ['ignore', 'pipe', 'inherit'] })
  catcher = child
  const said = await new Promise<string>(resolve => child.stdout.once('data', part => resolve(String(part))))
  ;({ mail: page, smtp } = JSON.parse(said) as { mail: string, smtp: number })
}, 30_000)
afterAll(() => {
  catcher.kill()
  fs.rmSync(folder, { recursive: true, force: true })
})

const send = (to: string, subject: string) => createTransport(`smtp://127.0.0.1:${smtp}`).sendMail({
  from: 'records@x.example', to, bcc: 'hidden@y.example', subject, text: 'Read https://x.example/l/a?b=1&c=2.', html: '<p>Read</p><script>parent.taken = 1</script>',
  attachments: [{ filename: 'record.pdf', content: Buffer.from('%PDF-1.7') }],
})
const get = (place: string) => fetch(page + place).then(async answer => ({ status: answer.status, headers: answer.headers, text: await answer.text() }))
const newest = async () => (JSON.parse((await get('/messages.json')).text) as { id: string, envelope: { to: string[] } }[])[0]!

describe('the mail catcher', { timeout: 30_000 }, () => {
  it('keeps a message whole, with the envelope that names the hidden recipient too', async () => {
    await send('clerk@y.example', 'A record')
    const { id, envelope } = await newest()
    expect(envelope.to).toEqual(['clerk@y.example', 'hidden@y.example'])
    expect(fs.readFileSync(path.join(folder, `${id}.eml`), 'utf8')).toContain('Subject: A record')
    const attachment = await get(`/messages/${id}/attachments/0`)
    expect(attachment.text).toBe('%PDF-1.7')
    expect(attachment.headers.get('content-disposition')).toContain('record.pdf')
  })

  it('shows what came by mail as text, and its own HTML only in a frame that runs nothing', async () => {
    await send('clerk@y.example', '<script>taken()</script>')
    const { id } = await newest()
    const shown = await get(`/messages/${id}`)
    expect(shown.text).not.toContain('<script>')
    expect(shown.text).toContain('href="https://x.example/l/a?b=1&#38;c=2"')
    expect((await get(`/messages/${id}/html`)).headers.get('content-security-policy')).toMatch(/^sandbox allow-popups allow-popups-to-escape-sandbox; default-src 'none'/)
    expect((await get('/')).text).not.toContain('<script>')
  })

  it('returns mail to an address that it is told not to know', async () => {
    await expect(createTransport(`smtp://127.0.0.1:${smtp}`).sendMail({ from: 'a@x.example', to: 'nobody@y.example', text: 'x' })).rejects.toMatchObject({ responseCode: 550 })
  })

  it('shows nothing to a name that an outside page points at this machine, and nothing outside of its folder', async () => {
    const status = await new Promise(resolve => http.get(page, { headers: { host: 'outside.example' } }, answer => resolve(answer.statusCode)))
    expect(status).toBe(421)
    expect((await get('/messages/..%2f..%2fetc%2fpasswd')).status).toBe(404)
  })
})
