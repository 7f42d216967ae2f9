/** To be written. */
export function SoundingsView() {
  return <h1>SoundingsView</h1>
}
