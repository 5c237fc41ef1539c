import type { ComponentProps, ReactNode } from 'react'
import { Link } from 'react-router-dom'

export type ButtonLook = 'primary' | 'quiet' | 'danger' | 'plain'
export type ButtonSize = 'normal' | 'large'

type Looks = { readonly look?: ButtonLook; readonly size?: ButtonSize }

const base =
  'inline-flex items-center justify-center gap-2 rounded-control text-center font-medium no-underline transition-colors disabled:cursor-default aria-disabled:cursor-default'

const sizes: Readonly<Record<ButtonSize, string>> = {
  normal: 'min-h-(--control) px-(--control-pad) py-1',
  large: 'min-h-(--control-large) px-(--control-pad) py-1',
}

/** Every look keeps a real border: in forced colours it is all that is left of the shape. */
const looks: Readonly<Record<ButtonLook, string>> = {
  primary:
    'forced-color-adjust-none border border-cord bg-cord text-on-cord hover:border-ink active:bg-ink active:text-paper disabled:border-dashed disabled:border-rule disabled:bg-card disabled:text-ink-2 aria-disabled:border-dashed aria-disabled:bg-card aria-disabled:text-ink',
  quiet: 'border border-rule bg-card text-ink hover:border-ink active:bg-cord-wash disabled:border-dashed disabled:text-ink-2 aria-disabled:border-dashed',
  danger: 'border border-bad bg-card text-bad hover:bg-bad-wash active:bg-bad active:text-card disabled:border-dashed aria-disabled:border-dashed',
  plain: 'border border-transparent px-2! text-cord underline-offset-4 hover:underline active:bg-cord-wash disabled:text-ink-2',
}

function toClass({ look = 'quiet', size = 'normal' }: Looks, more: string | undefined): string {
  return [base, sizes[size], looks[look], more].filter(Boolean).join(' ')
}

type ButtonProps = ComponentProps<'button'> &
  Looks & {
    /** What stands on the button while its act runs; it then takes no second press, and keeps the focus. */
    readonly busy?: string | false | undefined
    readonly children: ReactNode
  }

export function Button({ look, size, busy, className, children, onClick, type = 'button', ...rest }: ButtonProps) {
  const isBusy = typeof busy === 'string'
  return (
    <button
      {...rest}
      type={isBusy ? 'button' : type}
      aria-disabled={isBusy ? true : rest['aria-disabled']}
      className={toClass({ ...(look && { look }), ...(size && { size }) }, className)}
      onClick={isBusy ? undefined : onClick}
    >
      {isBusy ? busy : children}
    </button>
  )
}

type ButtonLinkProps = ComponentProps<typeof Link> & Looks

/** A way to another page that looks like a button; it stays a link for the keyboard, the ear and the right mouse button. */
export function ButtonLink({ look, size, className, ...rest }: ButtonLinkProps) {
  return <Link {...rest} className={toClass({ ...(look && { look }), ...(size && { size }) }, className)} />
}
