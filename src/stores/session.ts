import { defineStore } from 'pinia'
import { computed, ref, shallowRef } from 'vue'
import { mayDo, type Permission, type Role } from '#shared/permissions.ts'
import type { SignedIn, SignedInUser, SignIn } from '#shared/schemas/auth.ts'
import { signIn as requestSignIn, signOut as requestSignOut } from '@/api/auth.ts'
import { refreshSession, setAccessToken, whenSignedOut } from '@/api/client.ts'

const SITE_KEY = 'scruple.site'
/** Whether a refresh cookie may be there: without it the first visit asks nothing. It is no secret and proves nothing. */
const KNOWN_KEY = 'scruple.signed-in'

/** Who is signed in, at which of their sites they are working, and what they may do there. */
export const useSessionStore = defineStore('session', () => {
  const user = shallowRef<SignedInUser>()
  const siteId = ref(localStorage.getItem(SITE_KEY) ?? '')
  const hasAsked = ref(false)

  const site = computed(() => user.value?.sites.find(({ id }) => id === siteId.value) ?? user.value?.sites[0])
  const roles = computed<readonly Role[]>(() => site.value?.roles ?? [])
  const isSignedIn = computed(() => user.value !== undefined)

  function accept(signedIn: SignedIn | undefined): void {
    user.value = signedIn?.user
    setAccessToken(signedIn?.accessToken)
    hasAsked.value = true
    if (signedIn) localStorage.setItem(KNOWN_KEY, 'yes')
    else localStorage.removeItem(KNOWN_KEY)
  }

  /** Asks the cookie once whether a session is still alive. */
  async function restore(): Promise<void> {
    if (hasAsked.value) return
    accept(localStorage.getItem(KNOWN_KEY) === null ? undefined : await refreshSession())
  }

  async function signIn(request: SignIn): Promise<void> {
    accept(await requestSignIn(request))
  }

  async function signOut(): Promise<void> {
    await requestSignOut()
    accept(undefined)
  }

  function chooseSite(id: string): void {
    siteId.value = id
    localStorage.setItem(SITE_KEY, id)
  }

  /** Whether the roles at the current site carry the permission; the server checks it again. */
  function may(permission: Permission): boolean {
    return mayDo(roles.value, permission)
  }

  whenSignedOut(() => accept(undefined))

  return { user, siteId, site, roles, isSignedIn, restore, signIn, signOut, chooseSite, may }
})
