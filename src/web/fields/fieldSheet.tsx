import { useEffect, useRef, useState } from 'preact/hooks'
import { type FieldAnswer } from '../../service/schemas/field.ts'
import { call } from '../api/client.ts'
import { reading } from '../readings.ts'
import { DeleteStored } from '../soundings/deleteStored.tsx'
import { utc } from '../soundings/words.ts'
import { CoverageMap } from './coverageMap.tsx'
import { type Spot, WindOverSpot } from './windOverSpot.tsx'

interface FieldSheetProps {
  id: string
  onDeleted: () => void
}

/** One forecast: when and where it is valid, and its wind over a place at a time. */
export function FieldSheet({ id, onDeleted }: FieldSheetProps) {
  const [field, setField] = useState<FieldAnswer | null>(null)
  const [spot, setSpot] = useState<Spot | null>(null)
  const [trouble, setTrouble] = useState<string | null>(null)
  const path = `/v1/fields/${encodeURIComponent(id)}`
  useEffect(() => {
    call<FieldAnswer>('GET', path).then(setField, (error: unknown) => {
      setTrouble(error instanceof Error ? error.message : String(error))
    })
  }, [id])
  const heading = useRef<HTMLHeadingElement>(null)
  useEffect(() => heading.current?.focus(), [field])

  if (trouble !== null) return <p role="alert">{trouble}</p>
  if (!field) return <p class="waiting">Opening …</p>
  const { name, referenceTime, validTimes, grid, levelsHPa, humidityLevels, heights } = field
  return (
    <article class="sounding" aria-labelledby="field-heading">
      <h2 id="field-heading" ref={heading} tabIndex={-1}>
        {name}
      </h2>
      <dl>
        <Fact name="Run of" value={utc(referenceTime)} />
        <Fact
          name="Valid"
          value={`${utc(validTimes[0])} to ${utc(validTimes[validTimes.length - 1])}`}
        />
        <Fact name="Grid" value={`${grid.description}, ${grid.columns} × ${grid.rows} points`} />
        <Fact
          name="Levels"
          value={`${levelsHPa.length}, from ${levelsHPa[0]} to ${levelsHPa[levelsHPa.length - 1]} hPa; humidity on ${humidityLevels}`}
        />
        <Fact
          name="Heights"
          value={`${reading('height', heights.lowestGeopotentialHeightM)} to ${reading('height', heights.highestGeopotentialHeightM)}`}
        />
      </dl>
      <CoverageMap field={field} spot={spot} />
      <WindOverSpot field={field} onSpot={setSpot} />
      <section class="notes" aria-labelledby="skipped-heading">
        <h3 id="skipped-heading">Messages passed over</h3>
        {field.skipped.length === 0 ? (
          <p>None.</p>
        ) : (
          <ul>
            {field.skipped.map(({ reason, messages }) => (
              <li key={reason}>
                {reason} ({messages})
              </li>
            ))}
          </ul>
        )}
      </section>
      <DeleteStored what="forecast" path={path} onDeleted={onDeleted} />
    </article>
  )
}

function Fact({ name, value }: { name: string; value: string }) {
  return (
    <div>
      <dt>{name}</dt>
      <dd>{value}</dd>
    </div>
  )
}
