import { getRequestHeader, getRequestIP } from 'h3'
import { CHECK_MOST } from '#shared/api/check'
import { defineRoute } from '../../http/defineRoute'
import { limitTries } from '../../http/limitTries'
import { readBytes } from '../../http/readChecked'
import { checkFile } from '../../services/check/checkRecord'
import { Failure } from '../../services/failure'

/** The public check of a file whose digest is not known: looked into, told, and not kept. */
export default defineRoute({ permission: 'public' }, async ({ event }) => {
  await limitTries('check-file', getRequestIP(event, { xForwardedFor: false }) ?? '', 20, 60)
  if (!/^application\/(pdf|octet-stream)\b/i.test(getRequestHeader(event, 'content-type') ?? '')) throw new Failure('wrongType', 'Send the PDF itself, with the header content-type: application/pdf.')
  const bytes = await readBytes(event, CHECK_MOST, 'The check takes files of 40 MB at most. Records from here are smaller.')
  if (!bytes?.length) throw new Failure('unreadable', 'No file came with this. Choose the PDF and send it again.')
  return checkFile(Buffer.from(bytes))
})
