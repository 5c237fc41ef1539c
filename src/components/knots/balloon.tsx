type BalloonProps = {
  readonly numeral: number
  /** `auto` follows the surface (28 px at the desk, 44 px at the bench). */
  readonly size?: 'small' | 'auto'
  /** `open`: the balloon of "no answer". */
  readonly look?: 'plain' | 'filled' | 'open'
}

const looks = {
  plain: 'border-cord bg-card text-cord',
  filled: 'forced-color-adjust-none border-cord bg-cord text-on-cord',
  open: 'border-rule bg-transparent text-ink-2',
} as const

/** The number of an outcome: on its button, its key, its edge and its row alike. Real text, so it is heard and can be said. */
export function Balloon({ numeral, size = 'auto', look = 'plain' }: BalloonProps) {
  const measure = size === 'small' ? 'size-6 text-[14px]' : 'size-(--balloon) text-[calc(var(--balloon)*0.46)]'
  return (
    <span className={`figures inline-flex shrink-0 items-center justify-center rounded-full border-2 leading-none font-medium ${measure} ${looks[look]}`}>
      {numeral}
    </span>
  )
}
