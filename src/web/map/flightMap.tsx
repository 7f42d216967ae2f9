import { useEffect, useLayoutEffect, useRef, useState } from 'preact/hooks'
import { scheme } from '../pictures/ink.ts'
import { type PicturesProps } from '../pictures/pictures.tsx'
import { unitSystem } from '../readings.ts'
import { AreaDrawing } from './areaDrawing.tsx'
import { type AreaPen } from './areaPen.ts'
import { FlightChart } from './flightChart.ts'
import './map.css'

/** The ground track on a map that is made once and drawn again as the runs change. */
export function FlightMap(props: PicturesProps) {
  const box = useRef<HTMLDivElement>(null)
  const chart = useRef<FlightChart | null>(null)
  const latest = useRef(props)
  const [pen, setPen] = useState<AreaPen | null>(null)
  latest.current = props

  useLayoutEffect(() => {
    if (!box.current) return
    const made = new FlightChart(box.current, latest.current, (polygon) =>
      latest.current.onAreaDrawn?.(polygon),
    )
    chart.current = made
    setPen(made.pen)
    return () => {
      made.close()
      chart.current = null
    }
  }, [])

  useEffect(() => {
    chart.current?.show(latest.current)
  }, [props.runs, props.cloud, props.areas])

  useEffect(() => {
    chart.current?.recolour()
  }, [scheme.value])

  useEffect(() => {
    chart.current?.drawFurniture()
  }, [unitSystem.value])

  return (
    <div class="flight-map">
      <div class="chart" ref={box} />
      {pen && <AreaDrawing pen={pen} />}
      <div class="chart-tools">
        {pen && props.onAreaDrawn && pen.corners.value === null && (
          <button
            type="button"
            onClick={() => {
              pen.start()
            }}
          >
            Draw an area
          </button>
        )}
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
