import { isTemp } from './temp.ts'

/** The formats that a sounding can be read from. */
export const soundingFormats = ['json', 'csv', 'igra', 'temp', 'bufr'] as const

export type SoundingFormat = (typeof soundingFormats)[number]

/** The formats that are text. */
export type TextFormat = Exclude<SoundingFormat, 'bufr'>

/** The format of a text, by what it begins with. What is nothing else must be CSV. */
export function recogniseText(text: string): TextFormat {
  const start = text.slice(0, 2000).trimStart()
  if (start.startsWith('{') || start.startsWith('[')) return 'json'
  if (/^#[A-Z0-9]{11} +\d{4} +\d{1,2} +\d{1,2} /.test(start)) return 'igra'
  return isTemp(start) ? 'temp' : 'csv'
}
