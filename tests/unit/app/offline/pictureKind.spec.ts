import sharp from 'sharp'
import { describe, expect, it } from 'vitest'
import { pictureKind } from '~/offline/pictureKind'

const bytes = (...parts: (string | number[])[]) => new Uint8Array(parts.flatMap(part => typeof part === 'string' ? [...part].map(letter => letter.charCodeAt(0)) : part))
const picture = sharp({ create: { width: 4, height: 3, channels: 3, background: '#456' } })

describe('what a file is', () => {
  it('is told by its content, as sharp writes pictures', async () => {
    expect(pictureKind(await picture.clone().jpeg().toBuffer()).name).toBe('JPEG')
    expect(pictureKind(await picture.clone().png().toBuffer()).name).toBe('PNG')
    expect(pictureKind(await picture.clone().webp().toBuffer()).name).toBe('WebP')
    expect(pictureKind(await picture.clone().avif().toBuffer())).toMatchObject({ picture: true, mime: 'image/avif' })
  })
  it('is HEIC by its brand (ISO/IEC 23008-12), and a film is none', () => {
    expect(pictureKind(bytes([0, 0, 0, 24], 'ftypheic'))).toMatchObject({ picture: true, mime: 'image/heic' })
    expect(pictureKind(bytes([0, 0, 0, 24], 'ftypisom'))).toEqual({ picture: false, mime: '', name: 'film' })
  })
  it('is a PDF whatever it is called', () => {
    expect(pictureKind(bytes('%PDF-1.7'))).toEqual({ picture: false, mime: '', name: 'PDF' })
    expect(pictureKind(bytes('PK', [3, 4]))).toMatchObject({ picture: false, name: 'ZIP' })
  })
  it('is nothing that is known: text, nothing at all, a head cut short', () => {
    for (const one of [bytes('hello'), bytes(), bytes([0xFF, 0xD8])]) expect(pictureKind(one)).toEqual({ picture: false, mime: '', name: null })
  })
})
