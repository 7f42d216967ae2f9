import type uPlot from 'uplot'
import { plainNumber } from '../readings.ts'
import { ink } from './ink.ts'

/** A number at an axis, with a decimal where its steps need one. */
export function tickText(tick: number): string {
  return plainNumber(tick, Number.isInteger(tick) ? 0 : 1)
}

const FONT = '12px system-ui, sans-serif'

/** Where an axis stands, as the chart library numbers it. */
export const side = {
  bottom: 2 as unknown as uPlot.Axis.Side,
  left: 3 as unknown as uPlot.Axis.Side,
}

/** The look that every axis of the pictures has. */
export function axis(label: string, more: Partial<uPlot.Axis>): uPlot.Axis {
  const rule = { stroke: ink('--rule'), width: 1 }
  return {
    label,
    font: FONT,
    labelFont: FONT,
    labelGap: 2,
    labelSize: 20,
    stroke: ink('--ink'),
    grid: rule,
    ticks: { ...rule, size: 5 },
    ...more,
  }
}
