/** The symbols of a flight's three places, as paths in a box from -8 to 8. */
export const marks = {
  /** An upright triangle */
  release: 'M0-7 7 6H-7Z',
  /** An asterisk of eight spokes */
  burst: 'M0-8V8M-8 0H8M-5.7-5.7 5.7 5.7M-5.7 5.7 5.7-5.7',
  /** A square with a cross */
  landing: 'M-6-6H6V6H-6ZM-6-6 6 6M-6 6 6-6',
} as const

export type Mark = keyof typeof marks

/** Draws a symbol on a canvas, its middle at x, y in canvas pixels. */
export function drawMark(
  canvas: CanvasRenderingContext2D,
  mark: Mark,
  x: number,
  y: number,
  { colour, paper, scale }: { colour: string; paper: string; scale: number },
): void {
  const path = new Path2D(marks[mark])
  canvas.save()
  canvas.translate(x, y)
  canvas.scale(scale, scale)
  canvas.setLineDash([])
  canvas.lineJoin = 'round'
  canvas.strokeStyle = paper
  canvas.lineWidth = 4.5
  canvas.stroke(path)
  if (mark !== 'burst') {
    canvas.fillStyle = paper
    canvas.fill(path)
  }
  canvas.strokeStyle = colour
  canvas.lineWidth = 2
  canvas.stroke(path)
  canvas.restore()
}
