import { useSyncExternalStore } from 'react'

const never = () => () => undefined

/** False until the page's script runs: a form that only the script can send is not pressed before. */
export const useReady = (): boolean => useSyncExternalStore(never, () => true, () => false)
