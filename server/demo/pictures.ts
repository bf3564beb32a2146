import { createHash } from 'node:crypto'
import sharp from 'sharp'
import type { PhotoRef } from '../../shared/entry/entry'

/** What a picture of the demo shows. Drawn, not taken: no picture of the demo pretends to be of a real place. */
export type DemoPicture = 'tieOut' | 'tieIn' | 'gapWide' | 'latchLow' | 'postLoose'

const mesh = (colour: string) => Array.from({ length: 46 }, (_, k) => `<path d="M${k * 60 - 900} 0l1200 1200M${k * 60 - 300} 1200l1200 -1200" stroke="${colour}" stroke-width="7" fill="none"/>`).join('')

const SCENES: Record<DemoPicture, { sky: string, more: string }> = {
  tieOut: { sky: '#B8C7CF', more: '<rect x="0" y="520" width="1600" height="90" fill="#8D9794"/><path d="M780 470v190q0 40 40 40l120 70" stroke="#D8DEDB" stroke-width="16" fill="none"/>' },
  tieIn: { sky: '#BFCBD1', more: '<rect x="0" y="520" width="1600" height="90" fill="#8D9794"/><path d="M780 500v130q0 30 30 30t30 -30v-130" stroke="#D8DEDB" stroke-width="16" fill="none"/>' },
  gapWide: { sky: '#AEBFA9', more: '<rect x="0" y="930" width="1600" height="270" fill="#6C5A3E"/><path d="M0 900h1600" stroke="#DDE3DF" stroke-width="12"/><path d="M760 905v70M730 905h60M730 975h60" stroke="#FFD24A" stroke-width="10"/>' },
  latchLow: { sky: '#B5C4CE', more: '<rect x="900" y="0" width="110" height="1200" fill="#59645F"/><rect x="760" y="560" width="300" height="60" fill="#2D3733"/><rect x="720" y="0" width="60" height="1200" fill="#7C8782"/>' },
  postLoose: { sky: '#A9BAA6', more: '<path d="M820 0l60 1000" stroke="#59645F" stroke-width="110"/><ellipse cx="880" cy="1020" rx="260" ry="60" fill="#8B8D88"/><path d="M760 1010q120 40 240 0" stroke="#3C3F3B" stroke-width="10" fill="none"/>' },
}

/** A JPEG of 1600 x 1200 px in final form, and the reference that an entry names it by. */
export async function drawPicture(picture: DemoPicture, seed: number, takenAt: string): Promise<{ bytes: Buffer, ref: PhotoRef }> {
  const { sky, more } = SCENES[picture]
  const svg = `<svg xmlns="http://www.w3.org/2000/svg" width="1600" height="1200"><defs><linearGradient id="g" x2="0" y2="1"><stop stop-color="${sky}"/><stop offset="1" stop-color="#7F8F7A"/></linearGradient></defs><rect width="1600" height="1200" fill="url(#g)"/><g transform="translate(${seed % 40} ${seed % 23})">${mesh('#5E6B66')}</g>${more}</svg>`
  const bytes = await sharp(Buffer.from(svg)).jpeg({ quality: 82 }).toBuffer()
  const digest = createHash('sha256').update(bytes).digest('hex')
  return { bytes, ref: { digest, width: 1600, height: 1200, taken: { digest: createHash('sha256').update(`${digest} as taken`).digest('hex'), at: takenAt, origin: 'camera' } } }
}
