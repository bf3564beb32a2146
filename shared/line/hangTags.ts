import { seg, tapeTag, tapeTagWidth, type Shape } from '../drawing/displayList'
import type { LineTag } from './lineMark'
import type { PieceOnRow, Scene } from './lineScene'
import { placeTags } from './placeLabels'

const LANES = 3

/** Flagging tape over a row, tied at the places of its findings. Tags beyond what three lanes hold are told with the one beside them ("B12 +2"). */
export function hangTags(pieces: readonly PieceOnRow[], scene: Scene): { list: Shape[], top: number } {
  const { scale, style, right } = scene
  const hung: { words: string, tag: LineTag, stem: number, foot: number, top: number }[] = []
  for (const piece of pieces) {
    for (const tag of piece.mark?.tags ?? []) {
      const along = tag.along ?? piece.element.length / 2
      // A broken element's tag hangs on the part that holds its place.
      if (along < piece.from || along > piece.to || (along === piece.to && piece.to < piece.element.length)) continue
      const t = piece.width ? (along - piece.from) * scale / piece.width : 0
      const foot = piece.left + (piece.right - piece.left) * t - piece.height
      hung.push({ words: tag.words, tag, stem: piece.x + piece.width * t, foot, top: foot })
    }
  }
  hung.sort((a, b) => a.stem - b.stem)
  for (;;) {
    const placed = placeTags(hung.map(tag => ({ stem: tag.stem, width: tapeTagWidth(tag.words, style.tag), top: tag.top })), { to: right, lanes: LANES, rise: style.tape + 9, height: style.tape })
    const without = placed.findIndex(place => !place)
    if (without < 0 || hung.length < 2) {
      const stems = hung.map((tag, i) => seg('tag', tag.stem, placed[i]!.y + 5, tag.stem, tag.foot, { role: tag.tag.state === 'settled' ? 'slate' : tag.tag.state === 'readAgain' ? 'brass' : 'rust', width: 1.25 }))
      const tapes = hung.flatMap((tag, i) => tapeTag(placed[i]!.left, placed[i]!.y, tag.words, { state: tag.tag.state, height: style.tape, size: style.tag }))
      return { list: [...stems, ...tapes], top: Math.min(...placed.map(place => place!.y), Infinity) }
    }
    // The open ones are the ones to be read first: fold the other into them.
    const beside = without + 1 < hung.length ? without + 1 : without - 1
    const [kept, folded] = hung[beside]!.tag.state !== 'open' && hung[without]!.tag.state === 'open' ? [without, beside] : [beside, without]
    const count = (words: string) => Number(/ \+(\d+)$/.exec(words)?.[1] ?? 0)
    hung[kept]!.words = `${hung[kept]!.words.replace(/ \+\d+$/, '')} +${count(hung[kept]!.words) + count(hung[folded]!.words) + 1}`
    hung.splice(folded, 1)
  }
}
