import type uPlot from 'uplot'
import { ink } from './ink.ts'

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
