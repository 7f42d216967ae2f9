import { type AreaPen } from './areaPen.ts'

/** What to do while an area is drawn, and the ways out of it. */
export function AreaDrawing({ pen }: { pen: AreaPen }) {
  const corners = pen.corners.value
  if (corners === null) return null
  return (
    <div class="area-drawing">
      <span class="map-middle" aria-hidden="true" />
      <p role="status">
        {corners.length === 0
          ? 'Click the corners of the area, or move the map by the arrow keys and set each corner at the cross by Enter.'
          : `${corners.length} ${corners.length === 1 ? 'corner' : 'corners'} set. Backspace takes the last one back.`}
      </p>
      <button
        type="button"
        disabled={corners.length < 3}
        onClick={() => {
          pen.finish()
        }}
      >
        Close the area (F)
      </button>
      <button
        type="button"
        onClick={() => {
          pen.cancel()
        }}
      >
        Drop it (Esc)
      </button>
    </div>
  )
}
