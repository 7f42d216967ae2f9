import { useEffect, useLayoutEffect, useRef } from 'preact/hooks'
import { scheme } from '../pictures/ink.ts'
import { type ShownRun } from '../pictures/shownRun.ts'
import { unitSystem } from '../readings.ts'
import { FlightChart } from './flightChart.ts'
import './map.css'

export interface FlightMapProps {
  /** The first is the one that the moment moves along */
  runs: ShownRun[]
}

/** The ground track on a map that is made once and drawn again as the runs change. */
export function FlightMap(props: FlightMapProps) {
  const box = useRef<HTMLDivElement>(null)
  const chart = useRef<FlightChart | null>(null)
  const latest = useRef(props)
  latest.current = props

  useLayoutEffect(() => {
    if (!box.current) return
    const made = new FlightChart(box.current, latest.current)
    chart.current = made
    return () => {
      made.close()
      chart.current = null
    }
  }, [])

  useEffect(() => {
    chart.current?.show(latest.current)
  }, [props.runs])

  useEffect(() => {
    chart.current?.recolour()
  }, [scheme.value])

  useEffect(() => {
    chart.current?.drawFurniture()
  }, [unitSystem.value])

  return (
    <div class="flight-map">
      <div class="chart" ref={box} />
      <div class="chart-tools">
        <button type="button" onClick={() => chart.current?.fit()}>
          Whole flight
        </button>
        <button type="button" aria-label="Zoom in" onClick={() => chart.current?.zoom(1)}>
          +
        </button>
        <button type="button" aria-label="Zoom out" onClick={() => chart.current?.zoom(-1)}>
          −
        </button>
      </div>
    </div>
  )
}
