import type uPlot from 'uplot'
import { ink } from './ink.ts'
import { type HeldSpan, windIn, type WindColumn } from './windColumn.ts'

/** Between arrows, CSS pixels. */
const ARROW_EVERY = 26
const ARROW_LENGTH = 18
const HATCH_EVERY = 7

/** Hatches the heights at which the wind is held, and says so. */
export function drawHeld(plot: uPlot, held: readonly HeldSpan[], one: number): void {
  const { ctx: canvas, bbox } = plot
  const scale = devicePixelRatio
  for (const span of held) {
    const top = Math.max(plot.valToPos(span.top / one, 'x', true), bbox.top)
    const bottom = Math.min(plot.valToPos(span.bottom / one, 'x', true), bbox.top + bbox.height)
    const height = bottom - top
    if (height < 1) continue
    canvas.save()
    canvas.beginPath()
    canvas.rect(bbox.left, top, bbox.width, height)
    canvas.clip()
    canvas.setLineDash([])
    canvas.strokeStyle = ink('--quiet', plot.root)
    canvas.globalAlpha = 0.5
    canvas.lineWidth = scale
    canvas.beginPath()
    for (let x = bbox.left - height; x < bbox.left + bbox.width; x += HATCH_EVERY * scale) {
      canvas.moveTo(x, bottom)
      canvas.lineTo(x + height, top)
    }
    canvas.stroke()
    canvas.restore()
    label(plot, span, top, bottom)
  }
}

function label(plot: uPlot, { which }: HeldSpan, top: number, bottom: number): void {
  const { ctx: canvas, bbox } = plot
  const scale = devicePixelRatio
  if (bottom - top < 18 * scale) return
  const text = which === 'above' ? 'highest wind held' : 'lowest wind held'
  canvas.save()
  canvas.font = `${12 * scale}px system-ui, sans-serif`
  canvas.textBaseline = 'middle'
  const width = canvas.measureText(text).width
  const middle = (top + bottom) / 2
  canvas.fillStyle = ink('--sheet', plot.root)
  canvas.fillRect(bbox.left + 4 * scale, middle - 9 * scale, width + 8 * scale, 18 * scale)
  canvas.fillStyle = ink('--ink', plot.root)
  canvas.fillText(text, bbox.left + 8 * scale, middle)
  canvas.restore()
}

/** Arrows beside the plot, pointing where the wind blows to, north up. */
export function drawArrows(plot: uPlot, { winds }: WindColumn, one: number): void {
  const { ctx: canvas, bbox } = plot
  const scale = devicePixelRatio
  const x = bbox.left + bbox.width + 22 * scale
  canvas.save()
  canvas.setLineDash([])
  canvas.strokeStyle = ink('--wind', plot.root)
  canvas.lineWidth = 2 * scale
  canvas.lineCap = 'round'
  const bottom = bbox.top + bbox.height
  for (let y = bottom - 10 * scale; y > bbox.top + 4 * scale; y -= ARROW_EVERY * scale) {
    const altitude = plot.posToVal(y / scale - bbox.top / scale, 'x') * one
    const wind = windIn(winds, altitude)
    if (wind.windSpeedMs < 0.1) continue
    canvas.save()
    canvas.translate(x, y)
    canvas.rotate(((wind.windFromDeg + 180) * Math.PI) / 180)
    canvas.scale(scale, scale)
    canvas.lineWidth = 2
    canvas.beginPath()
    canvas.moveTo(0, ARROW_LENGTH / 2)
    canvas.lineTo(0, -ARROW_LENGTH / 2)
    canvas.moveTo(-4.5, -ARROW_LENGTH / 2 + 6)
    canvas.lineTo(0, -ARROW_LENGTH / 2)
    canvas.lineTo(4.5, -ARROW_LENGTH / 2 + 6)
    canvas.stroke()
    canvas.restore()
  }
  canvas.restore()
}
