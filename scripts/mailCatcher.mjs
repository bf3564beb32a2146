// A mail server that delivers nowhere: it keeps each message as a file and shows them on a page of this machine alone.
import './lib/nodeVersion.mjs'
import { randomBytes } from 'node:crypto'
import fs from 'node:fs'
import http from 'node:http'
import path from 'node:path'
import process from 'node:process'
import { simpleParser } from 'mailparser'
import { SMTPServer } from 'smtp-server'
import { fontFile, listPage, messagePage, notFoundPage, styleSheet } from './lib/mailPages.mjs'

const folder = process.env.MAIL_CATCHER_FOLDER
const smtpPort = Number(process.env.MAIL_CATCHER_SMTP_PORT ?? 0)
const pagePort = Number(process.env.MAIL_CATCHER_PORT ?? 0)
/** Addresses whose mail is returned, as a server does that does not know them: for trying out the delivery log. */
const unknown = (process.env.MAIL_CATCHER_UNKNOWN ?? '').split(',').filter(Boolean)
if (!folder) throw new Error('MAIL_CATCHER_FOLDER is not set.')
fs.mkdirSync(folder, { recursive: true, mode: 0o700 })

const bytesOf = stream => new Promise((resolve, reject) => {
  const parts = []
  stream.on('data', part => parts.push(part)).on('end', () => resolve(Buffer.concat(parts))).on('error', reject)
})

/** Whole on the disk before the sender hears "accepted". The .json comes last: only then the message is listed. */
async function keep(raw, envelope) {
  const parsed = await simpleParser(raw, { skipImageLinks: true })
  const id = `${new Date().toISOString().replace(/[:.]/g, '-')}-${randomBytes(4).toString('hex')}`
  const message = {
    id,
    received: new Date().toISOString(),
    envelope,
    from: parsed.from?.text ?? '',
    to: [parsed.to ?? []].flat().map(address => address.text).join(', '),
    subject: parsed.subject ?? '',
    text: parsed.text ?? '',
    html: parsed.html || null,
    attachments: parsed.attachments.map(({ filename, contentType, size, checksum }) => ({ filename: filename ?? 'attachment', contentType, size, checksum })),
  }
  for (const [ending, content] of [['eml', raw], ['json', JSON.stringify(message, null, 2)]]) {
    const draft = path.join(folder, `${id}.${ending}.unfinished`)
    fs.writeFileSync(draft, content, { mode: 0o600, flush: true })
    fs.renameSync(draft, path.join(folder, `${id}.${ending}`))
  }
}

const smtp = new SMTPServer({
  disabledCommands: ['AUTH', 'STARTTLS'],
  size: 40_000_000,
  disableReverseLookup: true,
  onRcptTo({ address }, session, callback) {
    callback(unknown.includes(address) ? Object.assign(new Error('No such mailbox here'), { responseCode: 550 }) : null)
  },
  onData(stream, session, callback) {
    const envelope = { from: session.envelope.mailFrom ? session.envelope.mailFrom.address : '', to: session.envelope.rcptTo.map(recipient => recipient.address) }
    bytesOf(stream)
      .then((raw) => {
        if (stream.sizeExceeded) throw Object.assign(new Error('The message is too large'), { responseCode: 552 })
        return keep(raw, envelope)
      })
      .then(() => callback(null, 'kept'), callback)
  },
})
smtp.on('error', error => console.error(`mail: ${error.message}`))

const read = id => JSON.parse(fs.readFileSync(path.join(folder, `${id}.json`), 'utf8'))
const all = () => fs.readdirSync(folder).filter(name => name.endsWith('.json')).sort().reverse().map(name => read(name.slice(0, -5)))
const idPattern = /^\/messages\/([0-9TZ-]+-[0-9a-f]{8})(?:\/(html|source|attachments\/(\d+)))?$/

/** What a path answers: [status, type, body, more headers]. */
async function answer(pathname) {
  if (pathname === '/') return [200, 'text/html; charset=utf-8', listPage(all())]
  if (pathname === '/style.css') return [200, 'text/css; charset=utf-8', styleSheet()]
  const [, weight] = /^\/lexend-([46]00)\.woff2$/.exec(pathname) ?? []
  if (weight) return [200, 'font/woff2', fontFile(weight)]
  if (pathname === '/messages.json') return [200, 'application/json; charset=utf-8', JSON.stringify(all())]
  const [, id, part, number] = idPattern.exec(pathname) ?? []
  if (!id || !fs.existsSync(path.join(folder, `${id}.json`))) return [404, 'text/html; charset=utf-8', notFoundPage()]
  if (!part) return [200, 'text/html; charset=utf-8', messagePage(read(id))]
  if (part === 'html') // another's page: no scripts, nothing from outside, links only into a new window
    return [200, 'text/html; charset=utf-8', `<base target="_blank">${read(id).html ?? ''}`, { 'content-security-policy': 'sandbox allow-popups allow-popups-to-escape-sandbox; default-src \'none\'; style-src \'unsafe-inline\'; img-src data:; frame-ancestors \'self\'' }]
  const raw = fs.readFileSync(path.join(folder, `${id}.eml`))
  if (part === 'source') return [200, 'text/plain; charset=utf-8', raw]
  const attachment = (await simpleParser(raw)).attachments[Number(number)]
  if (!attachment) return [404, 'text/html; charset=utf-8', notFoundPage()]
  const name = encodeURIComponent(attachment.filename ?? 'attachment').replace(/['()*]/g, letter => `%${letter.charCodeAt(0).toString(16)}`)
  return [200, 'application/octet-stream', attachment.content, { 'content-disposition': `attachment; filename*=UTF-8''${name}` }]
}

const page = http.createServer((request, response) => {
  const send = ([status, type, body, more = {}]) => {
    response.writeHead(status, {
      'content-type': type,
      'cache-control': 'no-store',
      'x-content-type-options': 'nosniff',
      'referrer-policy': 'no-referrer',
      'content-security-policy': 'default-src \'none\'; style-src \'self\'; font-src \'self\'; frame-src \'self\'; base-uri \'none\'; form-action \'none\'; frame-ancestors \'none\'',
      ...more,
    })
    response.end(request.method === 'HEAD' ? undefined : body)
  }
  // a name that an outside page points at this address must not read the mail
  if (!/^(127\.0\.0\.1|localhost):\d+$/.test(request.headers.host ?? '')) return send([421, 'text/plain', 'Only for this machine.'])
  if (!['GET', 'HEAD'].includes(request.method ?? '')) return send([405, 'text/plain', 'Only to be read.'])
  answer(new URL(request.url ?? '/', 'http://127.0.0.1').pathname).then(send, (error) => {
    console.error(`mail: ${error.message}`)
    send([500, 'text/plain', 'The message could not be read.'])
  })
})

smtp.listen(smtpPort, '127.0.0.1')
page.listen(pagePort, '127.0.0.1', () => console.log(JSON.stringify({ mail: `http://127.0.0.1:${page.address().port}`, smtp: smtp.server.address().port })))
for (const signal of ['SIGINT', 'SIGTERM'])
  process.on(signal, () => {
    page.close()
    page.closeAllConnections()
    smtp.close(() => process.exit(0))
  })
