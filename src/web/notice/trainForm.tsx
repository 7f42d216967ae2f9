import { useState } from 'preact/hooks'
import { type Flight } from '../../service/schemas/flight.ts'
import { call, ServiceProblem } from '../api/client.ts'
import { Fault as Failure } from '../parts/fault.tsx'
import { draftOf } from '../plan/draft.ts'
import { Packages } from '../plan/packages.tsx'
import { trainChange, type Fault } from '../plan/request.ts'

interface TrainFormProps {
  flight: Flight
  /** Something of the flight train is not known */
  missing: boolean
  onKept: () => void
}

/** Asks for what the class of the balloon hangs on, and keeps it with the flight. */
export function TrainForm({ flight, missing, onKept }: TrainFormProps) {
  const [train, setTrain] = useState(() => draftOf(flight.title, flight.plan))
  const [faults, setFaults] = useState<readonly Fault[]>([])
  const [error, setError] = useState<Error | null>(null)

  const keep = async () => {
    const { change, faults: unread } = trainChange(train)
    setFaults(unread)
    setError(null)
    if (unread.length > 0) return
    try {
      await call('PATCH', `/v1/flights/${flight.id}`, change)
      onKept()
    } catch (failure) {
      if (failure instanceof ServiceProblem) setFaults(failure.faults)
      setError(failure as Error)
    }
  }

  return (
    <form
      class="sheet stack"
      aria-label="Flight train"
      onSubmit={(event) => {
        event.preventDefault()
        void keep()
      }}
    >
      <Packages
        packages={train.packages}
        lineStrengthN={train.lineStrengthN}
        faults={faults}
        open={missing}
        onChange={(changes) => {
          setTrain({ ...train, ...changes })
        }}
      />
      <div>
        <button>Keep the packages with the flight</button>
      </div>
      <Failure error={error} />
    </form>
  )
}
