// The mail catcher's pages. Everything that came by mail is escaped; a message's own HTML is shown in a closed frame.
import fs from 'node:fs'
import path from 'node:path'
import { projectRoot } from './dataFolder.mjs'

const escape = text => String(text).replace(/[&<>"']/g, sign => `&#${sign.charCodeAt(0)};`)

/** Plain text with its web addresses made into links. */
const linked = text => text.split(/(https?:\/\/[^\s<>"]*[^\s<>".,;:!?)\]])/).map((part, at) => at % 2 ? `<a href="${escape(part)}" rel="noreferrer">${escape(part)}</a>` : escape(part)).join('')

const sizeOf = bytes => bytes < 1000 ? `${bytes} bytes` : bytes < 1e6 ? `${(bytes / 1e3).toFixed(0)} kB` : `${(bytes / 1e6).toFixed(1)} MB`
const whenOf = received => `<time datetime="${escape(received)}">${escape(received.slice(0, 16).replace('T', ' '))} UTC</time>`

const page = (title, body) => `<!doctype html>
<html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width, initial-scale=1">
<title>${escape(title)}</title><link rel="stylesheet" href="/style.css"></head>
<body><header><a href="/">Caught mail</a></header><main>${body}</main></body></html>`

export function listPage(messages) {
  const rows = messages.map(({ id, subject, to, received, attachments }) => `<li><a href="/messages/${id}">${escape(subject || '(no subject)')}</a>
    <span>to ${escape(to)}</span> <span>${whenOf(received)}</span>${attachments.length ? ` <span>${attachments.length} attached</span>` : ''}</li>`)
  return page('Caught mail', `<h1>Caught mail</h1>
    <p>Smoothside sent these messages; they went no further than this machine. The newest stands first.</p>
    ${rows.length ? `<ol>${rows.join('')}</ol>` : '<p>No message yet. One appears here as soon as Smoothside sends it; load the page again to look.</p>'}`)
}

export function messagePage({ id, subject, from, to, envelope, received, text, html, attachments }) {
  const handed = envelope.to.join(', ')
  return page(subject || '(no subject)', `<h1>${escape(subject || '(no subject)')}</h1>
    <dl><dt>From</dt><dd>${escape(from)}</dd><dt>To</dt><dd>${escape(to)}</dd>${handed === to ? '' : `<dt>Handed over for</dt><dd>${escape(handed)}</dd>`}<dt>Received</dt><dd>${whenOf(received)}</dd></dl>
    ${attachments.length ? `<h2>Attached</h2><ul>${attachments.map(({ filename, size }, at) => `<li><a href="/messages/${id}/attachments/${at}">${escape(filename)}</a> <span>${sizeOf(size)}</span></li>`).join('')}</ul>` : ''}
    <h2>Text</h2>${text ? `<pre>${linked(text)}</pre>` : '<p>This message has no plain text.</p>'}
    ${html ? `<h2>As formatted</h2><iframe src="/messages/${id}/html" title="The message as formatted"></iframe>` : ''}
    <p><a href="/messages/${id}/source">Source of the message</a></p>`)
}

export const notFoundPage = () => page('Not here', '<h1>Not here</h1><p>There is no such message. <a href="/">See all caught mail</a>.</p>')

/** Lexend as the application ships it. @param {string} weight */
export const fontFile = weight => fs.readFileSync(path.join(projectRoot, `node_modules/@fontsource/lexend/files/lexend-latin-${weight}-normal.woff2`))

/** The application's own roles of colour and measure, so that this page looks of one piece with it. */
export const styleSheet = () => `${fs.readFileSync(path.join(projectRoot, 'app/assets/css/tokens.css'), 'utf8')}
${[400, 600].map(weight => `@font-face { font-family: Lexend; font-weight: ${weight}; src: url(/lexend-${weight}.woff2) format('woff2') }`).join('\n')}
* { box-sizing: border-box }
body { margin: 0; background: var(--page); color: var(--ink); font: 400 var(--t-body)/var(--lead-text) Lexend, system-ui, sans-serif }
header { background: var(--paper); border-bottom: var(--w-line) solid var(--mark) }
header a { display: inline-block; padding: var(--s-3) var(--s-4); min-height: 24px; font-weight: 600; text-decoration: none }
main { max-width: 44rem; margin: 0 auto; padding: var(--s-4) }
h1 { font-size: var(--t-head); line-height: var(--lead-tight); overflow-wrap: anywhere } h2 { font-size: var(--t-lead) }
a { color: var(--pine) } a:focus-visible, iframe:focus-visible { outline: 3px solid var(--focus-ring); outline-offset: 2px; box-shadow: 0 0 0 5px var(--focus-ground) }
ol, ul { list-style: none; padding: 0 } li { padding: var(--s-3) 0; border-bottom: var(--w-hair) solid var(--line) }
li a { display: block; padding: var(--s-2) 0; font-weight: 600; overflow-wrap: anywhere } li span { color: var(--soft); margin-right: var(--s-3) }
dl { display: grid; grid-template-columns: max-content 1fr; gap: var(--s-1) var(--s-4) } dt { color: var(--soft) } dd { margin: 0; overflow-wrap: anywhere }
pre { font: inherit; white-space: pre-wrap; overflow-wrap: anywhere; background: var(--paper); border: var(--w-hair) solid var(--line); padding: var(--s-4) }
iframe { width: 100%; height: 30rem; border: var(--w-hair) solid var(--line); background: #fff }
`
