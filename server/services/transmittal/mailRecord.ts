import { uuidv7 } from 'uuidv7'
import * as transmittals from '../../database/queries/transmittal'
import { forOrganisation, withSession } from '../../database/withSession'
import { composeMail, recordName, wordOf } from '../../mail/composeMail'
import { sendMail } from '../../mail/sendMail'
import { useSettings } from '../../settings'
import { useStorage } from '../../storage/storage'
import { makeLink } from '../account/sendLink'
import { Failure } from '../failure'
import { pdfKey } from '../record/sealRecord'

/** Largest file that is attached, as the mail carries it (base64 with line ends). Many servers return more than 10 MB. */
const ATTACHED_MOST = 10_000_000
const asMailed = (bytes: number) => Math.ceil(bytes / 57) * 78

/** Mails one recipient a record: the link to their page, and the PDF where it is small enough. Writes into the delivery log what the mail server said. */
export async function mailRecord(organisationId: string, recipientId: string): Promise<void> {
  const session = forOrganisation(organisationId)
  const mail = await withSession(session, tx => transmittals.mailToSend(tx, recipientId))
  if (!mail || mail.handed) return
  const note = (kind: 'handed' | 'returned' | 'deferred', detail: string) => withSession(session, tx => transmittals.addEvent(tx, recipientId, uuidv7(), kind, detail.slice(0, 300)))
  // A role's mailbox is nobody who could sign in: it gets the file and the check page.
  const link = mail.mailbox ? `${useSettings().origin}/check/${mail.code}` : await makeLink({ purpose: 'contact', organisationId, contactId: mail.contactId, recordId: mail.recordId, email: mail.email })
  const attached = asMailed(mail.bytes) <= ATTACHED_MOST
  const file = attached ? await useStorage().get(pdfKey(organisationId, mail.fileDigest)) : null
  const record = recordName(mail.language, mail.scope, mail.number)
  const composed = composeMail(mail.language, mail.mailbox ? 'recordToMailbox' : 'record', {
    name: mail.name, organisation: mail.organisationName, record, site: mail.siteName, sentence: mail.sentence ? `${mail.sentence.lead} ${mail.sentence.rest}` : '', message: mail.message, link,
    attached: wordOf(mail.language, file ? 'attached' : 'tooLarge'),
  })
  try {
    const { response } = await sendMail({ to: { name: mail.name, address: mail.email }, ...composed, attachments: file ? [{ filename: `${mail.code}-${mail.scope}.pdf`, content: file, contentType: 'application/pdf' }] : [] })
    await note('handed', response)
  }
  catch (error) {
    if (!(error instanceof Failure)) throw error
    await note(error.code === 'mailDown' ? 'deferred' : 'returned', error.message)
    // Deferred: the queue tries again, later each time.
    if (error.code === 'mailDown') throw error
  }
}
