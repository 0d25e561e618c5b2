import { runningApp } from '#server/running'

export default defineTask({
  meta: { name: 'film:sweep', description: 'Leaves no film without its row and no row without its film.' },
  async run() {
    await runningApp().jobs.run('film:sweep')
    return { result: 'done' }
  },
})
