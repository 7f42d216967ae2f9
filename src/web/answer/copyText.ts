/** Puts text on the clipboard, also where the page is served over plain HTTP; false where it cannot. */
export async function copyText(text: string): Promise<boolean> {
  if (window.isSecureContext) {
    try {
      await navigator.clipboard.writeText(text)
      return true
    } catch {
      // Not allowed: the older way may be.
    }
  }
  const field = document.createElement('textarea')
  field.value = text
  field.className = 'unseen'
  document.body.append(field)
  field.select()
  // The only way in a page without TLS, which a laptop in the field serves.
  // eslint-disable-next-line @typescript-eslint/no-deprecated
  const copied = document.execCommand('copy')
  field.remove()
  return copied
}
