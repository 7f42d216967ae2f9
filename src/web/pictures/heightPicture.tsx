import { useMemo } from 'preact/hooks'
import uPlot from 'uplot'
import { unitOf, unitSystem } from '../readings.ts'
import { axis, tickText } from './axes.ts'
import { ink, runToken, scheme } from './ink.ts'
import { drawMark, type Mark } from './marks.ts'
import { burstIndex } from './moment.ts'
import { Plot } from './plot.tsx'
import { type ShownRun } from './shownRun.ts'
import { clock } from './words.ts'

/** Steps between labelled times, s. */
const TIME_STEPS = [60, 120, 300, 600, 900, 1800, 3600, 7200, 10_800, 21_600, 43_200, 86_400]

/** Height against time: ascent solid, descent dashed, the three places as symbols. */
export function HeightPicture({ runs, heights }: { runs: ShownRun[]; heights: [number, number] }) {
  const unit = unitOf('height')
  const shape = `${runs.length} ${unitSystem.value} ${scheme.value}`
  const data = useMemo(() => heightData(runs, unit.one), [runs, unit.one])
  const latest = { runs, heights }
  const kept = useMemo(() => ({ current: latest }), [])
  kept.current = latest

  const options = (): Omit<uPlot.Options, 'width' | 'height'> => ({
    legend: { show: false },
    cursor: { show: false },
    padding: [12, 12, 0, 0],
    scales: {
      x: { time: false, range: (_plot, _least, most) => [-0.03 * most, 1.04 * most] },
      y: { range: () => kept.current.heights.map((height) => height / unit.one) as Range },
    },
    axes: [
      axis('Time after release, h:mm', {
        incrs: TIME_STEPS,
        size: 30,
        space: 56,
        values: (_plot, ticks) => ticks.map((tick) => clock(tick, false)),
      }),
      axis(`Height, ${unit.symbol}`, {
        size: 56,
        values: (_plot, ticks) => ticks.map(tickText),
      }),
    ],
    series: [{}, ...runs.flatMap((_run, index) => runSeries(index))],
    hooks: {
      draw: [
        (plot) => {
          drawPlaces(plot, kept.current.runs, unit.one)
        },
      ],
    },
  })

  return (
    <Plot
      label="Height against time"
      options={options}
      shape={shape}
      data={data}
      track={runs[0].track}
      momentUnder={(plot, left) => plot.posToVal(left, 'x')}
      whereIs={(plot, row) => ({
        left: plot.valToPos(row.elapsedS, 'x'),
        top: plot.valToPos(row.altitudeM / unit.one, 'y'),
      })}
    />
  )
}

type Range = [number, number]

function runSeries(index: number): uPlot.Series[] {
  return (['ascent', 'descent'] as const).map((phase) => ({
    stroke: ink(runToken(index, phase)),
    width: index === 0 ? 2.5 : 1.5,
    spanGaps: true,
    pxAlign: 0,
    points: { show: false },
    ...(phase === 'descent' ? { dash: [7, 5] } : {}),
  }))
}

/** Two lines a run, on the times of all. */
function heightData(runs: readonly ShownRun[], one: number): uPlot.AlignedData {
  return uPlot.join(
    runs.flatMap(({ track }) => {
      const burst = burstIndex(track)
      return [track.slice(0, burst + 1), track.slice(burst)].map((rows): uPlot.AlignedData => [
        rows.map((row) => row.elapsedS),
        rows.map((row) => row.altitudeM / one),
      ])
    }),
  )
}

function drawPlaces(plot: uPlot, runs: readonly ShownRun[], one: number): void {
  const paper = ink('--sheet', plot.root)
  const scale = devicePixelRatio
  // The first run's symbols lie on top.
  for (const [index, { track }] of [...runs.entries()].reverse()) {
    const burst = burstIndex(track)
    const places: [Mark, number][] = [
      ['release', 0],
      ['burst', burst],
      ['landing', track.length - 1],
    ]
    for (const [mark, at] of places) {
      const { elapsedS, altitudeM } = track[at]
      const x = plot.valToPos(elapsedS, 'x', true)
      const y = plot.valToPos(altitudeM / one, 'y', true)
      const colour = ink(runToken(index, at < burst ? 'ascent' : 'descent'), plot.root)
      drawMark(plot.ctx, mark, x, y, { colour, paper, scale: index === 0 ? scale : 0.7 * scale })
      if (mark === 'burst' && runs.length > 1) tagRun(plot.ctx, index, x, y, colour)
    }
  }
}

/** The number of a run beside its burst. */
function tagRun(
  canvas: CanvasRenderingContext2D,
  index: number,
  x: number,
  y: number,
  colour: string,
) {
  const scale = devicePixelRatio
  canvas.save()
  canvas.font = `600 ${12 * scale}px system-ui, sans-serif`
  canvas.fillStyle = colour
  canvas.textBaseline = 'middle'
  canvas.fillText(String(index + 1), x + 11 * scale, y - 4 * scale)
  canvas.restore()
}
