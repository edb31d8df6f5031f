import type {
  CreateUser,
  FirstPassPhrase,
  RenameUser,
  ReplacePassPhrase,
  SetRoles,
  SetUserActive,
  UserAnswer,
} from '#shared/schemas/users.ts'
import { api } from './client.ts'

export const fetchUsers = (signal?: AbortSignal) => api.get<UserAnswer[]>('/users', signal ? { signal } : {})
export const createUser = (request: CreateUser) => api.post<FirstPassPhrase>('/users', request)
export const renameUser = (id: string, request: RenameUser) => api.put<UserAnswer>(`/users/${id}/name`, request)
export const setRoles = (id: string, request: SetRoles) => api.put<UserAnswer>(`/users/${id}/roles`, request)
export const setUserActive = (id: string, request: SetUserActive) => api.put<UserAnswer>(`/users/${id}/activity`, request)
export const replacePassPhrase = (id: string, request: ReplacePassPhrase) =>
  api.post<FirstPassPhrase>(`/users/${id}/first-pass-phrase`, request)
