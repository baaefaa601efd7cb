/** Comfort only: the server refuses by itself. Sends visitors to sign in and back to where they wanted to go. */
export default defineNuxtRouteMiddleware((to) => {
  const { principal } = useAccount()
  if (!principal.value) return navigateTo({ path: '/sign-in', query: { to: to.fullPath } })
})
