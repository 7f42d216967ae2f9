import { type MutableRef, useEffect, useLayoutEffect, useRef } from 'preact/hooks'
import uPlot from 'uplot'
import 'uplot/dist/uPlot.min.css'

export interface ChartProps {
  /** Everything but the size; asked for again when `shape` changes */
  options: () => Omit<uPlot.Options, 'width' | 'height'>
  /** Names what the options depend on: the plot is made anew only when it changes */
  shape: string
  data: uPlot.AlignedData
}

/**
 * A chart in the element of the answered ref: as large as it, made once for a shape, and drawn again for
 * new data. `made` is called with each new plot and answers what undoes it.
 */
export function useChart(
  props: ChartProps,
  made?: (plot: uPlot) => () => void,
): MutableRef<HTMLDivElement | null> {
  const box = useRef<HTMLDivElement | null>(null)
  const plot = useRef<uPlot | null>(null)
  const latest = useRef({ ...props, made })
  latest.current = { ...props, made }

  useLayoutEffect(() => {
    const element = box.current
    if (!element) return
    const { options, data, made } = latest.current
    const current = new uPlot({ ...options(), ...sizeOf(element) }, data, element)
    plot.current = current
    const undo = made?.(current)
    const watcher = new ResizeObserver(() => {
      current.setSize(sizeOf(element))
    })
    watcher.observe(element)
    return () => {
      watcher.disconnect()
      undo?.()
      current.destroy()
      plot.current = null
    }
  }, [props.shape])

  useEffect(() => {
    plot.current?.setData(props.data)
  }, [props.data])

  return box
}

function sizeOf(element: HTMLElement): { width: number; height: number } {
  return { width: Math.max(element.clientWidth, 80), height: Math.max(element.clientHeight, 80) }
}
