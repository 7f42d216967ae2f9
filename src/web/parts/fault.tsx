/** What went wrong, said at once to those who listen. */
export function Fault({ error }: { error: Error | null }) {
  return (
    <p class="fault" role="alert">
      {error?.message}
    </p>
  )
}
