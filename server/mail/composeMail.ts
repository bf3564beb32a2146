import en from '../../templates/mail/en.json'
import es from '../../templates/mail/es.json'

const catalogues = { en, es }
export type MailKind = Exclude<keyof typeof en, 'foot' | 'words'>

const escape = (text: string) => text.replace(/[&<>"]/g, mark => ({ '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;' })[mark]!)
const fill = (text: string, values: Record<string, string>) => text.replace(/\{(\w+)\}/g, (_, name: string) => values[name] ?? '')

/** Words a mail from templates/mail: paragraphs as plain text and as simple HTML, with one link as its button. */
export function composeMail(language: 'en' | 'es', kind: MailKind, values: Record<string, string>): { subject: string, text: string, html: string } {
  const { subject, paragraphs, button } = catalogues[language][kind]
  const lines = paragraphs.map(paragraph => fill(paragraph, values).trim()).filter(Boolean)
  const foot = fill(catalogues[language].foot.paragraphs[0]!, values)
  const text = [...lines, ...(button && values.link ? [`${fill(button, values)}: ${values.link}`] : []), foot].join('\n\n')
  const html = `<!doctype html><html lang="${language}"><body style="font:16px/1.5 sans-serif;color:#14211D;background:#F5F7F4;margin:0;padding:24px"><div style="max-width:560px;background:#fff;border:1px solid #6F7E77;padding:24px">`
    + lines.map(line => `<p>${escape(line)}</p>`).join('')
    + (button && values.link ? `<p><a href="${escape(values.link)}" style="display:inline-block;background:#0E5A43;color:#fff;padding:14px 18px;text-decoration:none;font-weight:500">${escape(fill(button, values))}</a></p>` : '')
    + `<p style="color:#465650;font-size:14px">${escape(foot)}</p></div></body></html>`
  return { subject: fill(subject, values), text, html }
}

/** A word of the catalogue that stands inside other sentences. */
export const wordOf = (language: 'en' | 'es', word: 'attached' | 'tooLarge') => catalogues[language].words[word]
/** "interim record 2", "final record 1". */
export const recordName = (language: 'en' | 'es', scope: 'interim' | 'final', number: number) => fill(catalogues[language].words[scope], { number: String(number) })
