import type { MaybeRefOrGetter } from 'vue'
import type { SessionAnswer } from '#shared/types/people'

const TICK_MS = 20_000

/**
 * The present moment for showing how long is left. The first value travels with the page, so that server and browser draw
 * the same; it ticks after mounting.
 * @param serverNowMs the server's own moment where an answer carries one, else that of the session's answer: the server's clock decides, the browser's only counts on
 */
export function useNow(serverNowMs?: MaybeRefOrGetter<number | undefined>) {
  const { data: session } = useNuxtData<SessionAnswer>(sessionKey)
  const told = () => toValue(serverNowMs) ?? session.value?.nowMs
  const nowMs = useState('now-ms', () => told() ?? Date.now())
  const aheadMs = useState('clock-ahead-ms', () => 0)

  const tick = () => {
    nowMs.value = Date.now() + aheadMs.value
  }
  const listen = (atMs: number | undefined) => {
    if (atMs === undefined) return
    aheadMs.value = atMs - Date.now()
    nowMs.value = atMs
  }

  let timer: number | undefined
  onMounted(() => {
    listen(told())
    tick()
    timer = window.setInterval(tick, TICK_MS)
  })
  onScopeDispose(() => window.clearInterval(timer))
  watch(told, listen)
  return nowMs
}
