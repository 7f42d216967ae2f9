import { useMemo } from 'preact/hooks'
import uPlot from 'uplot'
import { type FillAnswer } from '../../service/schemas/fill.ts'
import { durationWords } from '../distances.ts'
import { axis, side, tickText } from '../pictures/axes.ts'
import { useChart } from '../pictures/chart.ts'
import { ink, scheme } from '../pictures/ink.ts'
import { plainNumber, reading, unitOf, unitSystem } from '../readings.ts'

type Row = FillAnswer['tradeOff'][number]

/** Slower than this nobody releases, and faster no balloon of the trade is filled, m/s. Common practice. */
const SLOWEST = 1
const FASTEST = 12

/** What more gas gains and costs: neck lift against rate, burst, time and volume. */
export function TradeOff({ answer }: { answer: FillAnswer }) {
  const rows = useMemo(() => usefulRows(answer), [answer])
  const speed = unitOf('verticalSpeed')
  const height = unitOf('height')
  return (
    <section aria-labelledby="trade-heading">
      <h3 id="trade-heading">What more gas gains and costs</h3>
      <div class="trades">
        <Trade
          rows={rows}
          at={answer.neckLiftG}
          label={`Rate at release, ${speed.symbol}`}
          of={({ releaseRateMs }) => releaseRateMs / speed.one}
        />
        <Trade
          rows={rows}
          at={answer.neckLiftG}
          label={`Burst height, ${height.symbol}`}
          of={({ burstAltitudeM }) => burstAltitudeM / height.one}
        />
        <Trade
          rows={rows}
          at={answer.neckLiftG}
          label="Flight time, min"
          of={({ flightTimeS }) => flightTimeS / 60}
        />
        <Trade
          rows={rows}
          at={answer.neckLiftG}
          label="Gas to fill in, m³"
          of={({ volumeM3 }) => volumeM3}
        />
      </div>
      <details>
        <summary>The same in numbers</summary>
        <div
          class="scrolling"
          tabIndex={0}
          role="region"
          aria-label="What more gas gains and costs"
        >
          <table>
            <thead>
              <tr>
                <th scope="col">Neck lift</th>
                <th scope="col">At release</th>
                <th scope="col">Burst</th>
                <th scope="col">Flight</th>
                <th scope="col">Volume</th>
              </tr>
            </thead>
            <tbody>
              {rows.map((row) => (
                <tr key={row.neckLiftG}>
                  <th scope="row">{plainNumber(row.neckLiftG)} g</th>
                  <td>{reading('verticalSpeed', row.releaseRateMs, 1)}</td>
                  <td>{reading('height', row.burstAltitudeM)}</td>
                  <td>{durationWords(row.flightTimeS)}</td>
                  <td>{plainNumber(row.volumeM3, 2)} m³</td>
                </tr>
              ))}
            </tbody>
          </table>
        </div>
      </details>
    </section>
  )
}

/** The rows that somebody would fill, with the wanted fill among them. */
function usefulRows({ tradeOff, neckLiftG, ...flown }: FillAnswer): Row[] {
  const wanted: Row = {
    neckLiftG,
    releaseRateMs: flown.ascent.releaseRateMs,
    meanRateMs: flown.ascent.meanRateMs,
    burstAltitudeM: flown.burst.altitudeM,
    flightTimeS: flown.landing.elapsedS,
    volumeM3: flown.fill.volumeM3,
    gasMassG: flown.fill.gasMassG,
  }
  const slowest = Math.min(SLOWEST, 0.9 * wanted.releaseRateMs)
  const fastest = Math.max(FASTEST, 1.1 * wanted.releaseRateMs)
  return (
    tradeOff
      .filter(({ releaseRateMs: rate }) => rate >= slowest && rate <= fastest)
      // Two points side by side would bend the drawn line between them.
      .filter((row) => Math.abs(row.neckLiftG - neckLiftG) > 0.05 * neckLiftG)
      .concat(wanted)
      .sort((one, other) => one.neckLiftG - other.neckLiftG)
  )
}

const values = (_plot: uPlot, ticks: number[]) => ticks.map(tickText)

interface TradeProps {
  rows: readonly Row[]
  /** The neck lift worked out, g */
  at: number
  label: string
  of: (row: Row) => number
}

function Trade({ rows, at, label, of }: TradeProps) {
  const data = useMemo(
    (): uPlot.AlignedData => [
      rows.map(({ neckLiftG }) => neckLiftG / 1000),
      rows.map(of),
      rows.map((row) => (row.neckLiftG === at ? of(row) : null)),
    ],
    [rows, at, label],
  )
  const box = useChart({
    shape: `${label} ${scheme.value} ${unitSystem.value}`,
    data,
    options: () => ({
      cursor: { show: false },
      legend: { show: false },
      scales: { x: { time: false } },
      axes: [
        axis('Neck lift, kg', { side: side.bottom, size: 28, values }),
        axis(label, { side: side.left, size: 52, values }),
      ],
      series: [
        {},
        {
          stroke: ink('--ascent'),
          width: 2,
          points: { show: false },
          ...(uPlot.paths.spline && { paths: uPlot.paths.spline() }),
        },
        { stroke: ink('--ink'), points: { show: true, size: 10, fill: ink('--ink') } },
      ],
    }),
  })
  return <div class="trade" ref={box} role="img" aria-label={words(rows, at, label, of)} />
}

function words(rows: readonly Row[], at: number, label: string, of: TradeProps['of']): string {
  const wanted = rows.find(({ neckLiftG }) => neckLiftG === at)
  const ends = [rows[0], wanted, rows.at(-1)].flatMap((row) => row ?? [])
  const told = ends.map((row) => `${plainNumber(of(row), 1)} at ${plainNumber(row.neckLiftG)} g`)
  return `${label}, against neck lift: ${told.join('; ')}`
}
