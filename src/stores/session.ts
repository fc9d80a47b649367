import { computed, shallowRef } from 'vue'
import { defineStore } from 'pinia'
import { roleCovers, type Role } from '#shared/people/vocabulary'
import type { Session, SpaceBrief } from '#shared/session/contract'
import { sessionApi } from '@/api/session'
import { ApiError } from '@/api/client'

/** Who is signed in, and in which space. */
export const useSessionStore = defineStore('session', () => {
  const member = shallowRef<Session['member']>()
  const space = shallowRef<SpaceBrief>()
  let loading: Promise<void> | undefined

  const signedIn = computed(() => member.value !== undefined)
  const isSteward = computed(() => may('steward'))
  const isAdmin = computed(() => may('admin'))

  function may(role: Role) {
    return member.value?.status === 'active' && roleCovers(member.value.role, role)
  }

  function accept(session: Session) {
    member.value = session.member
    space.value = session.space
  }

  /** Asks the server once who this is; later calls wait for the same answer. */
  function load() {
    return (loading ??= read())
  }

  async function read() {
    try {
      accept(await sessionApi.current())
    } catch (error) {
      if (!(error instanceof ApiError) || error.code !== 'signed-out') {
        loading = undefined
        throw error
      }
      space.value = await sessionApi.space()
    }
  }

  async function signIn(email: string, password: string) {
    accept(await sessionApi.signIn({ body: { email, password } }))
    loading = Promise.resolve()
  }

  async function signOut() {
    await sessionApi.signOut()
    forget()
  }

  function forget() {
    member.value = undefined
  }

  return { member, space, signedIn, isSteward, isAdmin, may, accept, load, signIn, signOut, forget }
})
