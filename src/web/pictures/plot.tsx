import { effect } from '@preact/signals'
import { useEffect, useRef } from 'preact/hooks'
import type uPlot from 'uplot'
import { cursorElapsed } from '../cursor.ts'
import { type ChartProps, useChart } from './chart.ts'
import { momentAt } from './moment.ts'
import { momentKeys } from './momentKeys.ts'
import { type TrackRow } from './shownRun.ts'

interface PlotProps extends ChartProps {
  /** What the picture is, for those who do not see it */
  label: string
  track: TrackRow[]
  /** The moment under a point of the plot, s after release */
  momentUnder: (plot: uPlot, left: number, top: number) => number
  /** Where a moment is in the plot, CSS pixels */
  whereIs: (plot: uPlot, row: TrackRow) => { left: number; top: number }
}

/** A chart that shows and moves the shared moment. */
export function Plot(props: PlotProps) {
  const latest = useRef(props)
  latest.current = props
  const box = useChart(props, (plot) => followMoment(plot, () => latest.current))
  useEffect(
    () =>
      box.current ? momentKeys(box.current, props.label, () => latest.current.track) : undefined,
    [props.label, props.track],
  )
  return <div class="plot" ref={box} />
}

/** Moves the plot's marker with the moment, and the moment with a pointer over the plot. */
function followMoment(plot: uPlot, props: () => PlotProps): () => void {
  const marker = document.createElement('div')
  marker.className = 'moment-marker'
  plot.over.append(marker)
  const place = () => {
    const elapsed = cursorElapsed.value
    marker.hidden = elapsed === null
    if (elapsed === null) return
    const { track, whereIs } = props()
    const { left, top } = whereIs(plot, momentAt(track, elapsed))
    marker.style.transform = `translate(${left}px, ${top}px)`
  }
  const stop = effect(place)
  plot.hooks.draw = [...(plot.hooks.draw ?? []), place]

  const point = (event: PointerEvent) => {
    const { left, top } = plot.over.getBoundingClientRect()
    cursorElapsed.value = props().momentUnder(plot, event.clientX - left, event.clientY - top)
  }
  const leave = (event: PointerEvent) => {
    // A finger leaves whenever it lifts; what it pointed at stays to be read.
    if (event.pointerType === 'mouse') cursorElapsed.value = null
  }
  plot.over.addEventListener('pointerdown', point)
  plot.over.addEventListener('pointermove', point)
  plot.over.addEventListener('pointerleave', leave)
  return stop
}
