// What the scripts say on the terminal, and how they say that something is in the way.
import process from 'node:process'

/** Something the reader can put right: its message is one sentence or two that say what is wrong and what to do. */
export class Trouble extends Error {}

const plain = !process.stdout.isTTY || process.env.NO_COLOR
const paint = (code, text) => (plain ? text : `\u001b[${code}m${text}\u001b[0m`)

/** Runs one step and tells its beginning, its end and how long it took. What `run` returns as a string is said behind it. */
export async function step(title, run) {
  const begin = Date.now()
  console.log(`${paint(36, '*')} ${title} ...`)
  const said = await run()
  const seconds = (Date.now() - begin) / 1000
  console.log(`  ${paint(32, 'done')}${typeof said === 'string' ? `: ${said}` : ''}${seconds >= 1 ? ` (${seconds.toFixed(0)} s)` : ''}`)
  return said
}

/** Says a line that belongs to the step that is running. */
export const say = text => console.log(`  ${text}`)

/** The sentence for a fault of the machine: what it is, and what to do. */
export function explain(error) {
  if (error instanceof Trouble) return error.message
  const where = error?.path ?? error?.dest ?? ''
  const text = `${error?.code ?? ''} ${error?.message ?? error}`
  if (/ENOSPC|No space left on device/i.test(text))
    return `The disk is full${where ? ` (while writing ${where})` : ''}. Free some space, or set SMOOTHSIDE_DATA to a folder on another disk, and start again.`
  if (/EACCES|EPERM|Permission denied/i.test(text))
    return `This user may not read or write ${where || 'a file that is needed'} (${text.trim()}). Start as the user who owns it, or set SMOOTHSIDE_DATA to a folder of your own.`
  return null
}

/**
 * The outermost frame of a script: a trouble is one clear sentence on the screen, a fault of ours comes with its stack.
 * @param {() => unknown} main
 * @param {(tell: () => void) => unknown} [onTrouble] may do something first, or leave out the telling
 */
export async function runScript(main, onTrouble = tell => tell()) {
  try {
    await main()
  }
  catch (error) {
    process.exitCode = 1
    await onTrouble(() => {
      const sentence = explain(error)
      console.error(`\n${paint(31, 'Stopped.')} ${sentence ?? 'Smoothside met a fault of its own:'}`)
      if (!sentence) console.error(error)
    })
  }
}
