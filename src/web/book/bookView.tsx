/** To be written. */
export function BookView() {
  return <h1>BookView</h1>
}
