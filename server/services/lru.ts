/** A memory of bounded size: what was used longest ago is forgotten first. */
export class Lru<Key, Value> {
  readonly #most: number
  readonly #entries = new Map<Key, Value>()

  constructor(most: number) {
    this.#most = most
  }

  get(key: Key): Value | undefined {
    const value = this.#entries.get(key)
    if (value !== undefined) {
      this.#entries.delete(key)
      this.#entries.set(key, value)
    }
    return value
  }

  set(key: Key, value: Value): void {
    this.#entries.delete(key)
    this.#entries.set(key, value)
    const oldest = this.#entries.size > this.#most ? this.#entries.keys().next() : null
    if (oldest?.done === false) this.#entries.delete(oldest.value)
  }

  delete(key: Key): void {
    this.#entries.delete(key)
  }
}
