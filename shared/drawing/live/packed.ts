/** A block of words that wants to stand at a height. */
export interface Block { wanted: number, height: number }

/**
 * Tops of blocks that stand under one another without overlap inside [top, bottom], in their order, each as near as may be to where it wants to be.
 * Where all together are too high, the last ones run out at the bottom: give fewer.
 */
export function packed(blocks: readonly Block[], top: number, bottom: number): number[] {
  const tops: number[] = []
  let below = top
  for (const { wanted, height } of blocks) {
    tops.push(Math.max(wanted, below))
    below = tops.at(-1)! + height
  }
  let above = bottom
  for (let i = blocks.length - 1; i >= 0; i--) {
    tops[i] = Math.max(top, Math.min(tops[i]!, above - blocks[i]!.height))
    above = tops[i]!
  }
  return tops
}
