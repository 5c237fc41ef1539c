/** Copies a field's text. The clipboard API is not to be had on plain http, so the field itself is the second way. */
export async function copyText(field: HTMLInputElement): Promise<boolean> {
  try {
    await navigator.clipboard.writeText(field.value)
    return true
  } catch {
    field.select()
    return document.execCommand('copy')
  }
}
