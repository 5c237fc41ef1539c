export type BcryptOrder =
  { readonly kind: 'hash'; readonly password: string; readonly cost: number } | { readonly kind: 'verify'; readonly password: string; readonly hash: string }
export type BcryptRequest = BcryptOrder & { readonly number: number }
export type BcryptReply = { readonly number: number; readonly answer: string | boolean } | { readonly number: number; readonly fault: string }
