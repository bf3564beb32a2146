import { encode } from 'uqr'
import type { Drawing } from '../../shared/drawing/displayList'
import { path } from '../../shared/drawing/displayList'

/** A QR code (ISO/IEC 18004, error correction M) as one path of squares, a unit a module, with the quiet zone of four that it asks for. */
export function squareCode(text: string): Drawing {
  const { data, size } = encode(text, { ecc: 'M', border: 4 })
  let d = ''
  data.forEach((row, y) => {
    // Neighbours in a row are one bar: no hairlines between modules in print.
    for (let x = 0; x < row.length; x++) {
      if (!row[x]) continue
      let end = x
      while (row[end + 1]) end++
      d += `M${x} ${y}L${end + 1} ${y}L${end + 1} ${y + 1}L${x} ${y + 1}Z`
      x = end
    }
  })
  return { list: [path('fit', d, { width: 0, fill: 'ink' })], width: size, height: size }
}
