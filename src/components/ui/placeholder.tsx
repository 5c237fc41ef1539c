/** What stands where something is awaited: nothing for 300 ms, then ruled rows, then the thing itself. */
export function Placeholder({ words = 'Loading', rows = 3 }: { readonly words?: string; readonly rows?: number }) {
  return (
    <div role="status" className="after-a-while">
      <span className="for-ears">{words}</span>
      <div aria-hidden="true" className="border-t border-rule">
        {Array.from({ length: rows }, (_, row) => (
          <div key={row} className="flex h-(--row) items-center border-b border-hair">
            <span className={`h-2 bg-hair ${row % 3 === 0 ? 'w-1/2' : row % 3 === 1 ? 'w-1/3' : 'w-2/5'}`} />
          </div>
        ))}
      </div>
    </div>
  )
}
