import { hash } from 'node:crypto'

/** SHA-256 of a text's UTF-8 in lower-case hex, by the engine itself: for every entry that the server reads. */
export const sha256 = (text: string): string => hash('sha256', text)
