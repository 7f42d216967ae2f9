import { faultyRequest } from './problems.ts'
import { schemaFaults } from './schemaFaults.ts'
import { type FlightChange } from './schemas/flight.ts'
import { planSchema, type Plan } from './schemas/plan.ts'

/**
 * A plan with a change made: groups of numbers are merged, tagged choices replaced whole.
 * @throws Problem 400 where what comes out is no plan
 */
export function changedPlan(plan: Plan, change: Omit<FlightChange, 'title'>): Plan {
  const { launch, balloon, gas, payload, ...replaced } = change
  const result = planSchema.safeParse(
    {
      ...plan,
      launch: { ...plan.launch, ...launch },
      balloon: { ...plan.balloon, ...balloon },
      gas: { ...plan.gas, ...gas },
      payload: { ...plan.payload, ...payload },
      ...replaced,
    },
    { reportInput: true },
  )
  if (!result.success) throw faultyRequest(400, schemaFaults(result.error))
  return result.data
}
