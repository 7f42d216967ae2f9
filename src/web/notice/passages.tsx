import { type Notice, type NoticeCrossing } from '../../service/schemas/notice.ts'
import { clock, place } from '../pictures/words.ts'
import { reading } from '../readings.ts'

/** When and where the flight passes each level, in the order of flight. */
export function Passages({ notice }: { notice: Notice }) {
  const { crossings, notReached } = notice
  const missed = [
    ...notReached.flightLevels.map((level) => `FL ${level}`),
    ...notReached.altitudesM.map((altitude) => reading('height', altitude)),
  ]
  return (
    <section aria-label="Passages of levels">
      <h2>Passages of levels</h2>
      {crossings.length > 0 && (
        <div class="scrolling" tabIndex={0} role="region" aria-label="Table of passages">
          <table>
            <thead>
              <tr>
                <th scope="col">Level</th>
                <th scope="col">Way</th>
                <th scope="col">Time, UTC</th>
                <th scope="col">After release</th>
                <th scope="col">Position</th>
                <th scope="col">Height</th>
              </tr>
            </thead>
            <tbody>
              {crossings.map((crossing) => (
                <tr key={`${crossing.elapsedS}-${levelName(crossing)}`}>
                  <th scope="row">{levelName(crossing)}</th>
                  <td>{crossing.way}</td>
                  <td>{crossing.time.slice(11, 19)}</td>
                  <td>{clock(crossing.elapsedS)}</td>
                  <td>{place(crossing.latitudeDeg, crossing.longitudeDeg)}</td>
                  <td>{reading('height', crossing.altitudeM)}</td>
                </tr>
              ))}
            </tbody>
          </table>
        </div>
      )}
      <p>
        A flight level is a pressure of the standard atmosphere: it is passed where the air that
        this run flew in has that pressure. Times and places lie on straight lines between the
        points of the track; heights are geometric, above sea level.
        {missed.length > 0 && ` Never passed: ${missed.join(', ')}.`}
      </p>
    </section>
  )
}

function levelName({ flightLevel, levelAltitudeM }: NoticeCrossing): string {
  return flightLevel === undefined ? reading('height', levelAltitudeM ?? 0) : `FL ${flightLevel}`
}
