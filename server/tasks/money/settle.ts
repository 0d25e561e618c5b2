import { runningApp } from '#server/running'

export default defineTask({
  meta: { name: 'money:settle', description: 'Asks the card provider about orders of which nothing was heard.' },
  async run() {
    await runningApp().jobs.run('money:settle')
    return { result: 'done' }
  },
})
