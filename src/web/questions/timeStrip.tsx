import { useEffect, useRef } from 'preact/hooks'
import { type WindowsAnswer } from '../../service/schemas/windows.ts'
import { lookedAt } from './whenState.ts'

export type TriedTime = WindowsAnswer['times'][number]

interface TimeStripProps {
  times: readonly TriedTime[]
  chosen: string | undefined
}

/** The release times side by side; stepped through by the arrow keys, as any group of radio buttons. */
export function TimeStrip({ times, chosen }: TimeStripProps) {
  const box = useRef<HTMLFieldSetElement>(null)
  useEffect(() => {
    const input = box.current?.querySelector('input:checked')
    input?.parentElement?.scrollIntoView({ block: 'nearest', inline: 'nearest' })
  }, [chosen])
  return (
    <fieldset class="strip" ref={box}>
      <legend>Release, UTC</legend>
      <div class="strip-times">
        {times.map((one, index) => {
          const day = dayOf(one.time)
          const newDay = index === 0 || dayOf(times[index - 1].time) !== day
          return (
            <label key={one.time} class={`strip-time ${one.passes ? 'keeps' : 'fails'}`}>
              <input
                class="unseen"
                type="radio"
                name="release-time"
                checked={one.time === chosen}
                onChange={() => {
                  lookedAt.value = one.time
                }}
              />
              <span class="day">{newDay ? day : '\u00a0'}</span>
              <strong>{one.time.slice(11, 16)}</strong>
              <span>{one.passes ? '✓ keeps' : one.figures ? '✕ fails' : '— no flight'}</span>
              <span class="quiet">no. {one.rank}</span>
            </label>
          )
        })}
      </div>
    </fieldset>
  )
}

function dayOf(time: string): string {
  return new Date(time).toLocaleDateString('en-GB', {
    timeZone: 'UTC',
    day: 'numeric',
    month: 'short',
  })
}
