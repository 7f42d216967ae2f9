import { useEffect, useMemo, useState } from 'preact/hooks'
import uPlot from 'uplot'
import { unitOf, unitSystem } from '../readings.ts'
import { levelsOf } from './levels.ts'
import { axis, side, tickText } from './axes.ts'
import { ink, runToken, scheme } from './ink.ts'
import { elapsedOnAscent } from './moment.ts'
import { Plot } from './plot.tsx'
import { type ShownRun } from './shownRun.ts'
import { windOfAscent, windOfLevels, type Level, type WindColumn } from './windColumn.ts'
import { drawArrows, drawHeld } from './windDrawing.ts'

/** The scale of speeds reaches at least so far, m/s: light winds look light. */
const LEAST_SPEED = 10

/** Wind against height: speed as a line, direction as arrows, levels marked, held wind hatched. */
export function WindPicture({ runs, heights }: { runs: ShownRun[]; heights: [number, number] }) {
  const levels = useLevels(runs[0])
  const columns = useMemo(
    () => runs.map((run, index) => columnOf(run, index === 0 ? levels : null)),
    [runs, levels],
  )
  const [height, speed] = [unitOf('height'), unitOf('windSpeed')]
  const data = useMemo(
    () => windData(columns, height.one, speed.one),
    [columns, height.one, speed.one],
  )
  const latest = { columns, heights }
  const kept = useMemo(() => ({ current: latest }), [])
  kept.current = latest

  const options = (): Omit<uPlot.Options, 'width' | 'height'> => ({
    legend: { show: false },
    cursor: { show: false },
    padding: [12, 44, 0, 0],
    scales: {
      x: {
        time: false,
        ori: 1,
        dir: 1,
        range: () => kept.current.heights.map((value) => value / height.one) as [number, number],
      },
      y: {
        ori: 0,
        range: (_plot, _least, most) => [0, Math.max(most * 1.08, LEAST_SPEED / speed.one)],
      },
    },
    axes: [
      axis(`Height, ${height.symbol}`, {
        side: side.left,
        size: 56,
        space: 30,
        values: (_plot, ticks) => ticks.map(tickText),
      }),
      axis(`Wind speed, ${speed.symbol}`, {
        side: side.bottom,
        size: 30,
        space: 40,
        values: (_plot, ticks) => ticks.map(tickText),
      }),
    ],
    series: [
      {},
      {
        stroke: ink('--wind'),
        width: 0,
        paths: () => null,
        points: { show: true, size: 6, width: 1.5, fill: ink('--sheet'), space: 0 },
      },
      ...columns.map((_column, index) => ({
        stroke: ink(index === 0 ? '--wind' : runToken(index, 'ascent')),
        width: index === 0 ? 2.5 : 1.5,
        spanGaps: true,
        pxAlign: 0,
        points: { show: false },
      })),
    ],
    hooks: {
      drawAxes: [
        (plot) => {
          drawHeld(plot, kept.current.columns[0].held, height.one)
        },
      ],
      draw: [
        (plot) => {
          drawArrows(plot, kept.current.columns[0], height.one)
        },
      ],
    },
  })

  return (
    <Plot
      label="Wind against height"
      options={options}
      shape={`${runs.length} ${unitSystem.value} ${scheme.value}`}
      data={data}
      track={runs[0].track}
      momentUnder={(plot, _left, top) =>
        elapsedOnAscent(runs[0].track, plot.posToVal(top, 'x') * height.one)
      }
      whereIs={(plot, row) => ({
        left: plot.valToPos(row.windSpeedMs / speed.one, 'y'),
        top: plot.valToPos(row.altitudeM / height.one, 'x'),
      })}
    />
  )
}

/** The levels of the sounding that a run was flown in, once they are here; null without a sounding. */
function useLevels({ run }: ShownRun): Level[] | null {
  const id = run.air.kind === 'profile' ? run.air.id : undefined
  const [got, setGot] = useState<{ id: string; levels: Level[] } | null>(null)
  useEffect(() => {
    if (id === undefined) return
    let wanted = true
    levelsOf(id).then(
      (levels) => {
        if (wanted) setGot({ id, levels })
      },
      // Without them the wind is drawn as the balloon met it.
      () => undefined,
    )
    return () => {
      wanted = false
    }
  }, [id])
  return got !== null && got.id === id ? got.levels : null
}

function columnOf({ run, track }: ShownRun, levels: Level[] | null): WindColumn {
  const bottom = Math.min(run.plan.launch.altitudeM, run.landing.altitudeM)
  return (levels && windOfLevels(levels, bottom, run.burst.altitudeM)) ?? windOfAscent(track)
}

/** Heights of all, the first run's speed at its levels, then every run's speed. */
function windData(
  columns: readonly WindColumn[],
  height: number,
  speed: number,
): uPlot.AlignedData {
  const [first] = columns
  const levels = new Set(first.levels)
  const atLevels = first.winds.filter(({ altitudeM }) => levels.has(altitudeM))
  return uPlot.join(
    [atLevels, ...columns.map(({ winds }) => winds)].map((winds): uPlot.AlignedData => [
      winds.map(({ altitudeM }) => altitudeM / height),
      winds.map(({ windSpeedMs }) => windSpeedMs / speed),
    ]),
  )
}
