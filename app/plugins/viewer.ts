/** Route guards and the top bar need to know who is here before the first page is chosen. */
export default defineNuxtPlugin({
  name: 'viewer',
  async setup() {
    await useSessionAnswer()
  },
})
