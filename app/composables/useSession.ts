import type { Me } from '#shared/api/account'
import type { Permission } from '#shared/permission/permission'
import { may as mayDo } from '#shared/permission/permission'
import { forgetProfile } from '~/offline/fieldProfile'

/** Who is signed in, in which standing, and what follows from it. Read once a page load by plugins/session.ts. */
export function useSession() {
  const me = useState<Me | null>('me', () => null)
  const reload = async () => { me.value = await useRequestFetch()<Me>('/api/account/me').catch((error: { status?: number }) => { if (error.status === 401) return null; throw error }) }
  return {
    me,
    reload,
    account: computed(() => me.value?.account ?? null),
    organisation: computed(() => me.value?.organisation ?? null),
    standing: computed(() => me.value?.standing ?? null),
    role: computed(() => me.value?.role ?? null),
    standings: computed(() => me.value?.standings ?? []),
    /** Whether this person may do that at all; the server asks again. */
    may: (permission: Permission) => me.value !== null && mayDo(me.value.standing === 'client' ? 'client' : me.value.role!, permission),
    /** The page that this standing begins on. */
    home: computed(() => ({ client: '/site', crew: '/w', staff: me.value?.role === 'inspector' ? '/w' : '/jobs' })[me.value?.standing ?? 'staff']),
    async signOut(everywhere = false) {
      await $fetch('/api/account/sign-out', { method: 'POST', body: { everywhere } })
      me.value = null
      const kept = forgetProfile()
      await navigateTo({ path: '/sign-in', query: kept > 0 ? { kept } : {} }, { external: true })
    },
    async actFor(standing: Me['standing'], organisationId: string | null) {
      await $fetch('/api/account/act-for', { method: 'POST', body: { standing, organisationId } })
      // A fresh load: nothing of the other organisation stays in memory.
      await navigateTo('/', { external: true })
    },
  }
}
