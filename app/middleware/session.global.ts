const OPEN = /^\/(sign-in|reset|check|link|parts|w)(\/|$)/

/** Whoever is not signed in goes to sign-in and comes back to where they wanted to go. */
export default defineNuxtRouteMiddleware((to) => {
  const { me, home } = useSession()
  if (OPEN.test(to.path)) return
  if (!me.value) return navigateTo({ path: '/sign-in', query: to.path === '/' ? {} : { to: to.fullPath } })
  if (to.path === '/') return navigateTo(home.value)
})
