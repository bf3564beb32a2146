/** What a file is by its first bytes; its name and type are only what somebody says. */
export interface PictureKind { picture: boolean, mime: string, name: string | null }

const ascii = (bytes: Uint8Array, from: number, to: number) => String.fromCharCode(...bytes.subarray(from, to))
const starts = (bytes: Uint8Array, ...head: number[]) => head.every((byte, at) => bytes[at] === byte)

/** Brands of the ISO base media file format (ISO/IEC 14496-12) that hold still pictures: HEIF (ISO/IEC 23008-12) and AVIF. */
const STILLS: Record<string, [mime: string, name: string]> = {
  heic: ['image/heic', 'HEIC'], heix: ['image/heic', 'HEIC'], mif1: ['image/heif', 'HEIF'], msf1: ['image/heif', 'HEIF'], avif: ['image/avif', 'AVIF'],
}

/** Reads the signatures of JPEG (ITU-T T.81), PNG (W3C), WebP (RFC 9649), HEIF and AVIF; names a PDF, a ZIP or a film where it is one. */
export function pictureKind(bytes: Uint8Array): PictureKind {
  if (starts(bytes, 0xFF, 0xD8, 0xFF)) return { picture: true, mime: 'image/jpeg', name: 'JPEG' }
  if (starts(bytes, 0x89, 0x50, 0x4E, 0x47, 0x0D, 0x0A, 0x1A, 0x0A)) return { picture: true, mime: 'image/png', name: 'PNG' }
  if (ascii(bytes, 0, 4) === 'RIFF' && ascii(bytes, 8, 12) === 'WEBP') return { picture: true, mime: 'image/webp', name: 'WebP' }
  if (ascii(bytes, 4, 8) === 'ftyp') {
    const still = STILLS[ascii(bytes, 8, 12)]
    return still ? { picture: true, mime: still[0], name: still[1] } : { picture: false, mime: '', name: 'film' }
  }
  return { picture: false, mime: '', name: ascii(bytes, 0, 5) === '%PDF-' ? 'PDF' : starts(bytes, 0x50, 0x4B, 3, 4) ? 'ZIP' : null }
}
