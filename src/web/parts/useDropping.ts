import { useState } from 'preact/hooks'

/** The handlers of a part of the page that takes dropped files, and whether some are held over it. */
export function useDropping(take: (files: File[]) => void) {
  const [over, setOver] = useState(false)
  const handlers = {
    onDragOver: (event: DragEvent) => {
      event.preventDefault()
      setOver(true)
    },
    onDragLeave: () => {
      setOver(false)
    },
    onDrop: (event: DragEvent) => {
      event.preventDefault()
      setOver(false)
      take([...(event.dataTransfer?.files ?? [])])
    },
  }
  return { over, handlers }
}
