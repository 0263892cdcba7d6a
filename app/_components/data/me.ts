'use client'
import { useQuery } from '@tanstack/react-query'
import type { Me } from '@/openapi/schemas/account'
import { ApiError, apiQuery } from './api'

/** Who is signed in. A 401 is an answer here, not a fault: nobody is. */
export const meQuery = () => apiQuery<Me>('/me')

export function useMe() {
  const { data, error, isPending, refetch } = useQuery({ ...meQuery(), retry: false })
  const nobody = error instanceof ApiError && error.problem.status === 401
  return { me: nobody ? null : (data?.data ?? null), nobody, isPending, error: nobody ? null : error, refetch }
}
