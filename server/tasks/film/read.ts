import { runningApp } from '#server/running'

export default defineTask({
  meta: { name: 'film:read', description: 'Reads clips whose reading was cut short.' },
  async run() {
    await runningApp().jobs.run('film:read')
    return { result: 'done' }
  },
})
