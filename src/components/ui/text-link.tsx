import type { ComponentProps } from 'react'
import { Link } from 'react-router-dom'

/** A link inside running text: underlined, since colour alone says nothing. */
export function TextLink({ className = '', ...rest }: ComponentProps<typeof Link>) {
  return <Link {...rest} className={`text-cord underline decoration-1 underline-offset-4 hover:decoration-2 ${className}`} />
}
