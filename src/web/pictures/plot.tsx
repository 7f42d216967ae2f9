import { effect } from '@preact/signals'
import { useEffect, useLayoutEffect, useRef } from 'preact/hooks'
import uPlot from 'uplot'
import 'uplot/dist/uPlot.min.css'
import { cursorElapsed } from '../cursor.ts'
import { momentAt } from './moment.ts'
import { momentKeys } from './momentKeys.ts'
import { type TrackRow } from './shownRun.ts'

interface PlotProps {
  /** What the picture is, for those who do not see it */
  label: string
  /** Everything but the size; asked for again when `shape` changes */
  options: () => Omit<uPlot.Options, 'width' | 'height'>
  /** Names what the options depend on: the plot is made anew only when it changes */
  shape: string
  data: uPlot.AlignedData
  track: TrackRow[]
  /** The moment under a point of the plot, s after release */
  momentUnder: (plot: uPlot, left: number, top: number) => number
  /** Where a moment is in the plot, CSS pixels */
  whereIs: (plot: uPlot, row: TrackRow) => { left: number; top: number }
}

/** A chart that shows and moves the shared moment. */
export function Plot(props: PlotProps) {
  const box = useRef<HTMLDivElement>(null)
  const plot = useRef<uPlot | null>(null)
  const latest = useRef(props)
  latest.current = props

  useLayoutEffect(() => {
    const element = box.current
    if (!element) return
    const { options, data } = latest.current
    const made = new uPlot({ ...options(), ...sizeOf(element) }, data, element)
    plot.current = made
    const stopFollowing = followMoment(made, () => latest.current)
    const watcher = new ResizeObserver(() => {
      made.setSize(sizeOf(element))
    })
    watcher.observe(element)
    return () => {
      watcher.disconnect()
      stopFollowing()
      made.destroy()
      plot.current = null
    }
  }, [props.shape])

  useEffect(() => {
    plot.current?.setData(props.data)
  }, [props.data])

  useEffect(() => {
    const element = box.current
    return element ? momentKeys(element, props.label, () => latest.current.track) : undefined
  }, [props.label, props.track])

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

function sizeOf(element: HTMLElement): { width: number; height: number } {
  return { width: Math.max(element.clientWidth, 80), height: Math.max(element.clientHeight, 80) }
}
