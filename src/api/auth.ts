import type { About, ChangePassPhrase, SessionSummary, SignedIn, SignIn } from '#shared/schemas/auth.ts'
import { api } from './client.ts'

export const signIn = (request: SignIn) => api.post<SignedIn>('/auth/sign-in', request)
export const signOut = () => api.post<undefined>('/auth/sign-out')
export const fetchAbout = () => api.get<About>('/about')
export const fetchSessions = (signal?: AbortSignal) => api.get<SessionSummary[]>('/auth/sessions', signal ? { signal } : {})
export const endSession = (id: string) => api.delete<undefined>(`/auth/sessions/${id}`)
export const changePassPhrase = (request: ChangePassPhrase) => api.put<undefined>('/auth/pass-phrase', request)
