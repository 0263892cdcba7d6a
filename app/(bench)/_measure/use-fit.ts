'use client'
import { keepPreviousData, useQuery } from '@tanstack/react-query'
import { useEffect, useState } from 'react'
import type { FieldFitAnswer } from '@/openapi/schemas/field-fits'
import { type ApiAnswer, apiSend } from '@/app/_components/data/api'

/** Typing is waited for, this long. */
const QUIET_MS = 350

/** A value once it has stayed for a while; the first one at once. */
function useSettled<T>(value: T, ms: number): T {
  const [settled, setSettled] = useState(value)
  useEffect(() => {
    const timer = setTimeout(() => setSettled(value), ms)
    return () => clearTimeout(timer)
  }, [value, ms])
  return settled
}

export interface FitState {
  answer: ApiAnswer<FieldFitAnswer> | undefined
  /** The request that the answer is to. */
  asked: string
  error: unknown
  /** A newer question is being asked or typed; the answer shown is to the last one. */
  waiting: boolean
  retry: () => void
}

/** Asks the API for the fit whenever the request has settled; what was shown stays until the new answer is there. */
export function useFit(body: Record<string, unknown> | null): FitState {
  const text = body === null ? '' : JSON.stringify(body)
  const asked = useSettled(text, QUIET_MS)
  const { data, error, isFetching, refetch } = useQuery({
    queryKey: ['field-fit', asked],
    queryFn: () => apiSend<FieldFitAnswer>('POST', '/field-fits', JSON.parse(asked)),
    enabled: asked !== '',
    placeholderData: keepPreviousData,
    retry: false,
    staleTime: 60_000,
  })
  return { answer: asked === '' ? undefined : data, asked, error, waiting: isFetching || asked !== text, retry: () => void refetch() }
}
