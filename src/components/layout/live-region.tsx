import { useAnnouncement } from '#src/lib/announce.ts'

/** Once on the page: says what `announce` was given. The same words twice are said twice. */
export function LiveRegion() {
  const { id, text } = useAnnouncement()
  return (
    <div role="status" aria-live="polite" className="for-ears">
      {text !== '' && <span key={id}>{text}</span>}
    </div>
  )
}
