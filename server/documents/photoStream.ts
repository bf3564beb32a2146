import type { PDFContext } from 'pdf-lib'
import { PDFRawStream } from 'pdf-lib'

interface Jpeg { width: number, height: number, space: 'DeviceGray' | 'DeviceRGB' }

/** Size and colours of a JPEG by its frame header (ITU-T T.81, B.2.2); null for what is no grey or RGB JPEG of 8 bits. */
export function readJpeg(bytes: Uint8Array): Jpeg | null {
  if (bytes[0] !== 0xFF || bytes[1] !== 0xD8) return null
  for (let at = 2; at + 9 < bytes.length && bytes[at] === 0xFF;) {
    const marker = bytes[at + 1]!
    const word = (offset: number) => bytes[at + offset]! * 256 + bytes[at + offset + 1]!
    if (marker >= 0xC0 && marker <= 0xCF && ![0xC4, 0xC8, 0xCC].includes(marker)) {
      const [bits, parts] = [bytes[at + 4], bytes[at + 9]]
      if (bits !== 8 || (parts !== 1 && parts !== 3)) return null
      return { height: word(5), width: word(7), space: parts === 1 ? 'DeviceGray' : 'DeviceRGB' }
    }
    at += 2 + word(2)
  }
  return null
}

const START = new TextEncoder().encode('\nstream\n')
const END = new TextEncoder().encode('\nendstream')

/**
 * A photo's own bytes as an image of a PDF. The writer of pdf-lib copies streams byte by byte, which takes longer than all the rest of a record with many
 * photos: this stream is copied at once.
 */
export function photoStream(context: PDFContext, bytes: Uint8Array, { width, height, space }: Jpeg): PDFRawStream {
  const stream = PDFRawStream.of(context.obj({ Type: 'XObject', Subtype: 'Image', Width: width, Height: height, BitsPerComponent: 8, ColorSpace: space, Filter: 'DCTDecode' }), bytes)
  stream.copyBytesInto = (buffer, start) => {
    let at = start + stream.dict.copyBytesInto(buffer, start)
    for (const part of [START, bytes, END]) {
      buffer.set(part, at)
      at += part.length
    }
    return at - start
  }
  return stream
}
