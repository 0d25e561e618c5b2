const warn = (event: BeforeUnloadEvent) => event.preventDefault()

/** Asks before the window is closed or reloaded: that would stop a film on its way. Other pages of the site do not. */
export function holdPage(isHeld: boolean): void {
  if (isHeld) window.addEventListener('beforeunload', warn)
  else window.removeEventListener('beforeunload', warn)
}
