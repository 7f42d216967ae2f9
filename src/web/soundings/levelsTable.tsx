import { useState } from 'preact/hooks'
import { type Level } from '../pictures/windColumn.ts'
import { plainNumber, unitOf } from '../readings.ts'
import { celsius } from './temperature.ts'

/** Rows that are shown at first: a sonde of our day reports thousands. */
const FIRST_ROWS = 200

/** The levels of a sounding as a table, made when it is opened. */
export function LevelsTable({ levels }: { levels: Level[] }) {
  const [open, setOpen] = useState(false)
  const [all, setAll] = useState(false)
  const shown = all ? levels : levels.slice(0, FIRST_ROWS)
  const [height, speed] = [unitOf('height'), unitOf('windSpeed')]
  return (
    <details
      onToggle={(event) => {
        setOpen(event.currentTarget.open)
      }}
    >
      <summary>Levels as a table ({levels.length})</summary>
      {open && (
        <div class="table-box" tabIndex={0} role="region" aria-label="Levels of the sounding">
          <table>
            <thead>
              <tr>
                <th scope="col">Height, {height.symbol}</th>
                <th scope="col">Pressure, hPa</th>
                <th scope="col">Temperature, °C</th>
                <th scope="col">Dew point, °C</th>
                <th scope="col">Wind from, °</th>
                <th scope="col">Wind speed, {speed.symbol}</th>
              </tr>
            </thead>
            <tbody>
              {shown.map((level) => (
                <tr key={level.geopotentialHeightM}>
                  <td>{plainNumber(level.altitudeM / height.one)}</td>
                  <td>{number(level.pressureHPa, 1)}</td>
                  <td>{number(celsius(level.temperatureK), 1)}</td>
                  <td>{number(celsius(level.dewPointK), 1)}</td>
                  <td>{number(level.windFromDeg, 0)}</td>
                  <td>
                    {number(
                      level.windSpeedMs === undefined ? undefined : level.windSpeedMs / speed.one,
                      1,
                    )}
                  </td>
                </tr>
              ))}
            </tbody>
          </table>
          {shown.length < levels.length && (
            <button
              type="button"
              onClick={() => {
                setAll(true)
              }}
            >
              Show all {levels.length} levels
            </button>
          )}
        </div>
      )}
    </details>
  )
}

function number(value: number | undefined, decimals: number): string {
  return value === undefined ? '–' : plainNumber(value, decimals)
}
