/** To be written. */
export function PlanView() {
  return <h1>PlanView</h1>
}
