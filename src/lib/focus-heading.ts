/** Puts the focus on the page's heading: for a control that goes away when it is pressed, so that ears and keyboard are not thrown back to nothing. */
export function focusHeading(): void {
  document.querySelector<HTMLElement>('h1')?.focus({ preventScroll: true })
}
