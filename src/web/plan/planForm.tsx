import { AirChoice } from '../parts/airChoice.tsx'
import { Choice } from './choice.tsx'
import { type PlanDraft } from './draft.ts'
import { Field } from './field.tsx'
import { Packages } from './packages.tsx'
import { change, draft, trialState } from './planState.ts'

type TextMember = {
  [Name in keyof PlanDraft]: string extends PlanDraft[Name] ? Name : never
}[keyof PlanDraft]

interface ValueProps {
  name: TextMember
  path: string
  label: string
  unit?: string
  type?: 'text' | 'datetime-local'
  hint?: string
}

/** The field of a text member of the draft. */
function Value({ name, ...rest }: ValueProps) {
  return (
    <Field
      {...rest}
      faults={trialState.value.faults}
      value={draft.value[name]}
      onType={(value) => {
        change({ [name]: value })
      }}
    />
  )
}

/** The plan, in the order in which a balloon is made ready. */
export function PlanForm() {
  return (
    <form
      class="plan-form stack"
      aria-label="Plan sheet"
      noValidate
      onSubmit={(event) => {
        event.preventDefault()
      }}
    >
      <fieldset>
        <legend>Place and time</legend>
        <div class="pair">
          <Value name="latitudeDeg" path="/launch/latitudeDeg" label="Latitude" unit="° N" />
          <Value name="longitudeDeg" path="/launch/longitudeDeg" label="Longitude" unit="° E" />
          <Value name="siteAltitudeM" path="/launch/altitudeM" label="Site height" unit="m" />
          <Value
            name="landingAltitudeM"
            path="/landingAltitudeM"
            label="Landing height"
            unit="m"
            hint="the site’s where left empty"
          />
        </div>
        <Value name="releaseTime" path="/launch/time" label="Release, UTC" type="datetime-local" />
      </fieldset>

      <fieldset>
        <legend>Balloon and gas</legend>
        <div class="pair">
          <Value name="balloonMassG" path="/balloon/massG" label="Balloon mass" unit="g" />
          <Value
            name="ratedBurstDiameterM"
            path="/balloon/ratedBurstDiameterM"
            label="Rated burst diameter"
            unit="m"
          />
          <Choice
            id="plan-gas-kind"
            label="Gas"
            value={draft.value.gasKind}
            options={[
              ['helium', 'Helium'],
              ['hydrogen', 'Hydrogen'],
            ]}
            onChoose={(gasKind) => {
              change({ gasKind })
            }}
          />
          <Value
            name="neckLiftG"
            path="/neckLiftG"
            label="Neck lift"
            unit="g"
            hint="pull at the neck, nothing hung on it"
          />
        </div>
        <details>
          <summary>Gas and drag in detail</summary>
          <div class="pair">
            <Value name="purityPercent" path="/gas/purity" label="Purity" unit="%" />
            <Value
              name="gasWarmerK"
              path="/gas/temperatureOffsetK"
              label="Gas warmer than air by"
              unit="K"
            />
          </div>
          <DragChoice />
        </details>
      </fieldset>

      <fieldset>
        <legend>Load and parachute</legend>
        <div class="pair">
          <Value
            name="payloadMassG"
            path="/payload/massG"
            label="Load below the neck"
            unit="g"
            hint="instruments, line, parachute"
          />
          <Value
            name="sharePercent"
            path="/balloon/shareLeftOnLine"
            label="Balloon left on the line"
            unit="%"
            hint="of its mass, after burst"
          />
        </div>
        <ParachuteChoice />
        <Packages
          packages={draft.value.packages}
          lineStrengthN={draft.value.lineStrengthN}
          faults={trialState.value.faults}
          onChange={change}
        />
      </fieldset>

      <fieldset>
        <legend>Air</legend>
        <div class="field">
          <label for="plan-air">Fly in</label>
          <AirChoice
            id="plan-air"
            air={draft.value.air}
            onChoose={(air) => {
              change({ air })
            }}
          />
        </div>
      </fieldset>
    </form>
  )
}

function DragChoice() {
  return (
    <>
      <Choice
        id="plan-drag-curve"
        label="Drag of the balloon"
        value={draft.value.dragCurve}
        options={[
          ['sounding-balloon', 'As sounding balloons were measured'],
          ['smooth-sphere', 'A smooth sphere'],
          ['constant', 'One coefficient throughout'],
        ]}
        onChoose={(dragCurve) => {
          change({ dragCurve })
        }}
      />
      {draft.value.dragCurve === 'constant' && (
        <Value name="constantDrag" path="/drag/coefficient" label="Drag coefficient" unit="" />
      )}
    </>
  )
}

function ParachuteChoice() {
  const by = draft.value.parachuteBy
  return (
    <>
      <Choice
        id="plan-parachute-by"
        label="Parachute given by"
        value={by}
        options={[
          ['size', 'its size'],
          ['area', 'its drag area'],
          ['speed', 'the speed at which it lands this load at sea level'],
        ]}
        onChoose={(parachuteBy) => {
          change({ parachuteBy })
        }}
      />
      <div class="pair">
        {by === 'size' && (
          <>
            <Value
              name="parachuteDiameterM"
              path="/parachute/diameterM"
              label="Diameter"
              unit="m"
            />
            <Value
              name="parachuteDragCoefficient"
              path="/parachute/dragCoefficient"
              label="Drag coefficient"
              hint="on its nominal area"
            />
          </>
        )}
        {by === 'area' && (
          <Value name="dragAreaM2" path="/parachute/dragAreaM2" label="Drag area" unit="m²" />
        )}
        {by === 'speed' && (
          <Value
            name="seaLevelDescentMs"
            path="/parachute/seaLevelDescentMs"
            label="Speed at sea level"
            unit="m/s"
          />
        )}
      </div>
    </>
  )
}
