/** Asks once who is signed in; the answer travels to the browser with the page. */
export default defineNuxtPlugin(async () => {
  const { me, load } = useAccount()
  if (!me.value) await load().catch(() => undefined)
})
