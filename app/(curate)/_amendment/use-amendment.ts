'use client'
import { useQuery } from '@tanstack/react-query'
import type { AmendmentDetail } from '@/openapi/schemas/amendment'
import { apiQuery } from '../../_components/data/api'

export const amendmentPath = (id: string): string => `/amendments/${encodeURIComponent(id)}`
export const useAmendment = (id: string) => useQuery({ ...apiQuery<AmendmentDetail>(amendmentPath(id)), staleTime: 5_000, refetchOnWindowFocus: true })

/** Whether the last review sent it back and nobody has asked anew. */
export const isReturned = (amendment: { state: string; review: { outcome: string | null } | null }): boolean => amendment.state === 'draft' && amendment.review?.outcome === 'returned'
