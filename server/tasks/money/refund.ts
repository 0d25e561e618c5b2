import { runningApp } from '#server/running'

export default defineTask({
  meta: { name: 'money:refund', description: 'Gives back the money that is due back.' },
  async run() {
    await runningApp().jobs.run('money:refund')
    return { result: 'done' }
  },
})
