/** The zone every time on a page is told in: the reader's own, never the machine's. */
export function useTimeZone() {
  const { viewer } = useViewer()
  return computed(() => viewer.value?.timeZone ?? 'UTC')
}
