/** Why the program can't start here, and the way out, in words for the person at the terminal; nothing was changed. */
export class StartRefusal extends Error {
  override readonly name = 'StartRefusal'
}
