/** A distance scale: how long its bar is, CSS pixels, and what it stands for. */
export interface Scale {
  pixels: number
  /** In the shown unit */
  length: number
}

/** The longest bar of a round length (1, 2 or 5 and noughts) that is at most `room` pixels long. */
export function scaleBar(unitsPerPixel: number, room: number): Scale {
  const most = unitsPerPixel * room
  const decade = 10 ** Math.floor(Math.log10(most))
  const length = [5, 2, 1].map((digit) => digit * decade).find((value) => value <= most) ?? decade
  return { pixels: length / unitsPerPixel, length }
}
