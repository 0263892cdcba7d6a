'use client'
import { useQuery } from '@tanstack/react-query'
import type { Account } from '@/openapi/schemas/session'
import { ApiError, apiQuery } from './api'

export const meQuery = () => apiQuery<Account>('/me')

/** Who is signed in. A 401 is an answer here, not a fault: nobody is. */
export function useMe() {
  const { data, error, isPending, refetch } = useQuery({ ...meQuery(), staleTime: 0 })
  const nobody = error instanceof ApiError && error.problem.status === 401
  return { me: nobody ? null : (data?.data ?? null), nobody, isPending, error: nobody ? null : error, refetch }
}
