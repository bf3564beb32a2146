import { createHash } from 'node:crypto'
import sharp from 'sharp'
import { fileTypeFromBuffer } from 'file-type'
import type { Session } from '../../database/withSession'
import { asProgram, withSession } from '../../database/withSession'
import * as photos from '../../database/queries/photo'
import { useStorage } from '../../storage/storage'
import { Failure, notFound } from '../failure'

/** Largest photo that is taken in, in bytes. */
export const PHOTO_MOST = 25_000_000
const SIDE_MOST = 2048

export const photoKey = (organisationId: string, digest: string) => `photo/${organisationId}/${digest}.jpg`
export const thumbnailKey = (organisationId: string, digest: string) => `thumbnail/${organisationId}/${digest}.jpg`

/**
 * Stores a photo's final bytes, which the device made before its entry: a JPEG, upright, sRGB, without metadata, at most 2048 px a side. The content says
 * what it is, not its name; the digest has to be the one in the path. Sent again, it changes nothing.
 */
export async function storePhoto(who: Session & { accountId: string, organisationId: string }, jobId: string, digest: string, bytes: Buffer): Promise<{ digest: string, bytes: number }> {
  if (bytes.length > PHOTO_MOST) throw new Failure('tooLarge', 'A photo may have 25 MB at most. Take it again with a smaller size.')
  const type = await fileTypeFromBuffer(bytes)
  if (type?.mime !== 'image/jpeg') throw new Failure('wrongType', `This is ${type ? `a ${type.ext.toUpperCase()} file` : 'no picture'}, not a JPEG photo. Choose a photo.`)
  if (createHash('sha256').update(bytes).digest('hex') !== digest) throw new Failure('differs', 'These bytes are not the ones that the entry names. Send the photo as the device keeps it.')
  const { width, height } = await checkFinal(bytes)
  const erased = await withSession(who, async (tx) => {
    if (!await photos.jobIsTheirs(tx, jobId)) throw notFound('job')
    return asProgram(tx, who, () => photos.photoIsErased(tx, digest))
  })
  // A device that still holds it may be done with it; what was erased is not taken in again.
  if (erased) return { digest, bytes: bytes.length }
  const thumbnail = await sharp(bytes).resize(480, 480, { fit: 'inside', withoutEnlargement: true }).jpeg({ quality: 78 }).toBuffer()
  // Files first, the row last: a row is only there when its file is.
  await useStorage().put(photoKey(who.organisationId, digest), bytes)
  await useStorage().put(thumbnailKey(who.organisationId, digest), thumbnail)
  await withSession(who, tx => photos.insertPhoto(tx, { digest, jobId, bytes: bytes.length, width, height, sentBy: who.accountId }))
  return { digest, bytes: bytes.length }
}

async function checkFinal(bytes: Buffer): Promise<{ width: number, height: number }> {
  const picture = await sharp(bytes).metadata().catch(() => { throw new Failure('wrongType', 'This photo cannot be read; the file is damaged. Take it again.') })
  const fault = picture.width > SIDE_MOST || picture.height > SIDE_MOST ? `it has ${picture.width} by ${picture.height} px, 2048 are the most`
    : picture.exif || picture.xmp || picture.iptc ? 'it still carries metadata of the camera'
      : picture.space !== 'srgb' ? 'its colours are not sRGB' : null
  if (fault) throw new Failure('invalid', `This is not a photo's final form: ${fault}. Send it from Smoothside's own screen, which makes it so.`)
  // A JPEG cut short has a good head; reading it all finds out.
  await sharp(bytes, { failOn: 'truncated' }).stats().catch(() => { throw new Failure('wrongType', 'This photo is cut short. Send it again.') })
  return { width: picture.width, height: picture.height }
}
