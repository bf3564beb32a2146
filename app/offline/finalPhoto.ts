import { sha256 } from '@noble/hashes/sha2.js'
import { bytesToHex } from '@noble/hashes/utils.js'
import type { PhotoRef } from '#shared/entry/entry'
import { FieldFault } from './fieldFault'
import { withOffset } from './instant'
import { pictureKind } from './pictureKind'

const SIDE_MOST = 2048
const FILE_MOST = 60_000_000
const QUALITY = 0.85

/**
 * A photo's final bytes, made before its entry: upright, sRGB, at most 2048 px a side, JPEG, nothing of the camera in it (a canvas keeps none).
 * The file as taken is described beside: its digest, when, and where from. Throws FieldFault.
 */
export async function finalPhoto(file: Blob, origin: 'camera' | 'gallery'): Promise<{ ref: PhotoRef, bytes: Uint8Array }> {
  if (file.size > FILE_MOST) throw new FieldFault('pictureTooLarge')
  const taken = new Uint8Array(await file.arrayBuffer())
  const kind = pictureKind(taken)
  if (!kind.picture) throw new FieldFault('notPicture', kind.name)
  const picture = await createImageBitmap(new Blob([taken], { type: kind.mime }), { imageOrientation: 'from-image' }).catch(() => { throw new FieldFault('pictureUnread', kind.name) })
  const scale = Math.min(1, SIDE_MOST / Math.max(picture.width, picture.height))
  const [width, height] = [Math.max(1, Math.round(picture.width * scale)), Math.max(1, Math.round(picture.height * scale))]
  const canvas = document.createElement('canvas')
  Object.assign(canvas, { width, height })
  const brush = canvas.getContext('2d', { alpha: false, colorSpace: 'srgb' })
  if (!brush) throw new FieldFault('pictureUnread', kind.name)
  // JPEG has no transparency; what was clear turns paper white, not black.
  brush.fillStyle = '#fff'
  brush.fillRect(0, 0, width, height)
  brush.imageSmoothingQuality = 'high'
  brush.drawImage(picture, 0, 0, width, height)
  picture.close()
  const blob = await new Promise<Blob | null>(resolve => canvas.toBlob(resolve, 'image/jpeg', QUALITY))
  // Frees the picture's memory at once; a phone has little.
  canvas.width = canvas.height = 0
  if (!blob) throw new FieldFault('pictureUnread', kind.name)
  const bytes = new Uint8Array(await blob.arrayBuffer())
  return { bytes, ref: { digest: await digestOf(bytes), width, height, taken: { digest: await digestOf(taken), at: await takenAt(taken, file), origin } } }
}

/** The browser's own hashing where there is one (secure pages), many times faster on 10 MB. */
async function digestOf(bytes: Uint8Array): Promise<string> {
  return bytesToHex(crypto.subtle ? new Uint8Array(await crypto.subtle.digest('SHA-256', bytes as BufferSource)) : sha256(bytes))
}

/** When the camera says it was taken; its clock without an offset is read in this device's zone. Else when the file was last written; null when nobody says. */
async function takenAt(bytes: Uint8Array, file: Blob): Promise<string | null> {
  const { default: exifr } = await import('exifr')
  const exif = await exifr.parse(bytes, { pick: ['DateTimeOriginal', 'OffsetTimeOriginal'], reviveValues: false }).catch(() => undefined) as { DateTimeOriginal?: unknown, OffsetTimeOriginal?: unknown } | undefined
  const found = /^(\d{4}):(\d\d):(\d\d) (\d\d:\d\d:\d\d)/.exec(String(exif?.DateTimeOriginal ?? ''))
  if (found) {
    const plain = `${found[1]}-${found[2]}-${found[3]}T${found[4]}`
    const offset = /^[+-]\d\d:\d\d$/.exec(String(exif?.OffsetTimeOriginal ?? ''))?.[0]
    const at = new Date(plain + (offset ?? ''))
    if (!Number.isNaN(at.getTime())) return offset ? plain + offset : withOffset(at)
  }
  return file instanceof File && file.lastModified > 0 ? withOffset(new Date(file.lastModified)) : null
}
