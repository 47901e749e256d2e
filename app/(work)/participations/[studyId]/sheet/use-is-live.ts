import { useSyncExternalStore } from 'react'

const never = () => () => undefined

/** False in what the server draws and in the first draw in the browser; true once scripts have taken over. */
export function useIsLive(): boolean {
  return useSyncExternalStore(
    never,
    () => true,
    () => false,
  )
}
