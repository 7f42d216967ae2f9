/** The formats that a sounding can be read from. */
export const soundingFormats = ['json', 'csv', 'igra'] as const

export type SoundingFormat = (typeof soundingFormats)[number]

/** The format of a text, by what it begins with. What is nothing else must be CSV. */
export function recogniseText(text: string): SoundingFormat {
  const start = text.slice(0, 2000).trimStart()
  if (start.startsWith('{') || start.startsWith('[')) return 'json'
  if (/^#[A-Z0-9]{11} +\d{4} +\d{1,2} +\d{1,2} /.test(start)) return 'igra'
  return 'csv'
}
