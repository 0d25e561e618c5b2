import { runningApp } from '#server/running'

export default defineTask({
  meta: { name: 'people:tidy', description: 'Clears sessions, links and keys that have run out.' },
  async run() {
    await runningApp().jobs.run('people:tidy')
    return { result: 'done' }
  },
})
