/** To be written. */
export function FlightView({ flightId }: { flightId: string }) {
  return <h1>{flightId}</h1>
}
