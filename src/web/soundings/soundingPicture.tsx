import { useMemo } from 'preact/hooks'
import type uPlot from 'uplot'
import { axis, side, tickText } from '../pictures/axes.ts'
import { useChart } from '../pictures/chart.ts'
import { ink, scheme } from '../pictures/ink.ts'
import { type Level, windOfLevels } from '../pictures/windColumn.ts'
import { drawArrows } from '../pictures/windDrawing.ts'
import { plainNumber, reading, unitOf, unitSystem } from '../readings.ts'
import { celsius } from './temperature.ts'

/** Temperature, dew point and wind of a sounding against height, side by side. */
export function SoundingPicture({ levels }: { levels: Level[] }) {
  const heights = levels.map(({ altitudeM }) => altitudeM)
  const range: [number, number] = [Math.min(...heights), Math.max(...heights)]
  const room = Math.max(0.04 * (range[1] - range[0]), 50)
  const shown: [number, number] = [range[0] - room, range[1] + room]
  return (
    <div class="sounding-pictures">
      <TemperatureChart levels={levels} heights={shown} />
      <WindChart levels={levels} heights={shown} />
    </div>
  )
}

interface ChartOf {
  levels: Level[]
  heights: [number, number]
}

function TemperatureChart({ levels, heights }: ChartOf) {
  const { one } = unitOf('height')
  const known = levels.filter(({ temperatureK }) => temperatureK !== undefined)
  const data = useMemo(
    (): uPlot.AlignedData => [
      known.map(({ altitudeM }) => altitudeM / one),
      known.map(({ temperatureK }) => celsius(temperatureK)),
      known.map(({ dewPointK }) => celsius(dewPointK)),
    ],
    [levels, one],
  )
  const box = useChart({
    shape: `${heights.join()} ${unitSystem.value} ${scheme.value}`,
    data,
    options: () => ({
      ...upright(heights, one, 'Temperature, °C', (_plot, least, most) => [least - 3, most + 3]),
      series: [
        {},
        {
          stroke: ink('--descent'),
          width: 2.5,
          pxAlign: 0,
          spanGaps: true,
          points: { show: false },
        },
        {
          stroke: ink('--ascent'),
          width: 2,
          dash: [5, 4],
          pxAlign: 0,
          points: { show: false },
        },
      ],
    }),
  })
  if (known.length === 0) return <p class="hint">The sounding has no temperatures.</p>
  return (
    <figure>
      <figcaption>
        Temperature <small>solid, dew point dashed</small>
      </figcaption>
      <div class="plot" ref={box} role="img" aria-label={temperatureWords(known)} />
    </figure>
  )
}

function WindChart({ levels, heights }: ChartOf) {
  const [height, speed] = [unitOf('height'), unitOf('windSpeed')]
  const column = useMemo(() => {
    const known = levels.filter(({ windSpeedMs }) => windSpeedMs !== undefined)
    const [bottom, top] = [known.at(0)?.altitudeM, known.at(-1)?.altitudeM]
    return bottom === undefined || top === undefined ? null : windOfLevels(levels, bottom, top)
  }, [levels])
  const winds = column?.winds ?? []
  const data = useMemo(
    (): uPlot.AlignedData => [
      winds.map(({ altitudeM }) => altitudeM / height.one),
      winds.map(({ windSpeedMs }) => windSpeedMs / speed.one),
    ],
    [column, height.one, speed.one],
  )
  const box = useChart({
    shape: `${heights.join()} ${unitSystem.value} ${scheme.value} ${winds.length}`,
    data,
    options: () => ({
      ...upright(heights, height.one, `Wind speed, ${speed.symbol}`, (_plot, _least, most) => [
        0,
        Math.max(most * 1.08, 1),
      ]),
      padding: [12, 44, 0, 0],
      series: [
        {},
        { stroke: ink('--wind'), width: 2.5, pxAlign: 0, spanGaps: true, points: { show: false } },
      ],
      hooks: {
        draw: [
          (plot) => {
            if (column) drawArrows(plot, column, height.one)
          },
        ],
      },
    }),
  })
  if (!column) return <p class="hint">The sounding has no wind.</p>
  return (
    <figure>
      <figcaption>
        Wind <small>arrows point where it blows to, north is up</small>
      </figcaption>
      <div class="plot" ref={box} role="img" aria-label={windWords(winds)} />
    </figure>
  )
}

/** A chart with height upwards. */
function upright(
  heights: [number, number],
  one: number,
  label: string,
  range: (plot: uPlot, least: number, most: number) => [number, number],
): Omit<uPlot.Options, 'width' | 'height' | 'series'> {
  return {
    legend: { show: false },
    cursor: { show: false },
    padding: [12, 12, 0, 0],
    scales: {
      x: { time: false, ori: 1, dir: 1, range: () => [heights[0] / one, heights[1] / one] },
      y: { ori: 0, range },
    },
    axes: [
      axis(`Height, ${unitOf('height').symbol}`, {
        side: side.left,
        size: 56,
        space: 30,
        values: (_plot, ticks) => ticks.map(tickText),
      }),
      axis(label, {
        side: side.bottom,
        size: 30,
        space: 40,
        values: (_plot, ticks) => ticks.map(tickText),
      }),
    ],
  }
}

function temperatureWords(levels: readonly Level[]): string {
  const coldest = levels.reduce((one, other) =>
    (other.temperatureK ?? Infinity) < (one.temperatureK ?? Infinity) ? other : one,
  )
  return `Temperature against height, coldest ${plainNumber(celsius(coldest.temperatureK) ?? 0, 1)} °C at ${reading('height', coldest.altitudeM)}. The levels follow as a table.`
}

function windWords(winds: readonly { altitudeM: number; windSpeedMs: number }[]): string {
  const strongest = winds.reduce((one, other) =>
    other.windSpeedMs > one.windSpeedMs ? other : one,
  )
  return `Wind against height, strongest ${reading('windSpeed', strongest.windSpeedMs)} at ${reading('height', strongest.altitudeM)}. The levels follow as a table.`
}
