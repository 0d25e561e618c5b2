/** Film that was on its way when the last page was closed goes on from any page; who sends none need not load what it takes. */
export default defineNuxtPlugin({
  name: 'uploads',
  dependsOn: ['viewer'],
  setup(nuxtApp) {
    const { viewer } = useViewer()
    onNuxtReady(async () => {
      if (viewer.value?.role !== 'student') return
      const { useUploadsStore } = await import('~/stores/uploads')
      await nuxtApp.runWithContext(() => useUploadsStore().goOnWithKept())
    })
  },
})
