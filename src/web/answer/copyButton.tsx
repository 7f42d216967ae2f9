import { useState } from 'preact/hooks'
import { copyText } from './copyText.ts'

/** A text that one click copies. */
export function CopyButton({ text, what }: { text: string; what: string }) {
  const [said, setSaid] = useState('')
  const copy = async () => {
    setSaid((await copyText(text)) ? 'copied' : 'not copied: select it by hand')
    setTimeout(() => {
      setSaid('')
    }, 3000)
  }
  return (
    <span class="copying">
      <span>{text}</span>{' '}
      <button type="button" aria-label={`Copy ${what}`} onClick={() => void copy()}>
        Copy
      </button>{' '}
      <span role="status">{said}</span>
    </span>
  )
}
