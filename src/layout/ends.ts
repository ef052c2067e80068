/** Names of ends: `K.a` of a tube, `S1.1` of a supply. Ids may hold dots themselves: the last one counts. */
import type { EndName, StringEntry } from './layout.js'

/** The end that the string meets first on its way from terminal 1 to terminal 2. */
export const enteringEnd = ({ tube, reversed }: StringEntry): EndName => `${tube}.${reversed ? 'b' : 'a'}`
export const leavingEnd = ({ tube, reversed }: StringEntry): EndName => `${tube}.${reversed ? 'a' : 'b'}`

/** The id of the tube or supply that an end belongs to; empty where the text names no end. */
export const partOf = (end: EndName): string => end.slice(0, Math.max(0, end.lastIndexOf('.')))

/** `a`, `b`, `1` or `2`: what stands behind the last dot. */
export const sideOf = (end: EndName): string => end.slice(end.lastIndexOf('.') + 1)
