import { runningApp } from '#server/running'

export default defineTask({
  meta: { name: 'mail:send', description: 'Sends the letters that are due.' },
  async run() {
    await runningApp().jobs.run('mail:send')
    return { result: 'done' }
  },
})
