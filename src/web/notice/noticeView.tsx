/** To be written. */
export function NoticeView({ runId }: { runId: string }) {
  return <h1>{runId}</h1>
}
