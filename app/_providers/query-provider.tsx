'use client'

import { QueryClient, QueryClientProvider } from '@tanstack/react-query'
import { useState, type ReactNode } from 'react'

/** Reads only: what people write never waits in a cache. A last known value with its age beats an empty screen. */
export function QueryProvider({ children }: { children: ReactNode }) {
  const [client] = useState(
    () =>
      new QueryClient({
        defaultOptions: {
          queries: {
            retry: 1,
            staleTime: 2000,
            // A shop's own network may be up while the browser believes it is offline.
            networkMode: 'always',
            refetchOnWindowFocus: true,
          },
          mutations: { networkMode: 'always', retry: false },
        },
      }),
  )
  return <QueryClientProvider client={client}>{children}</QueryClientProvider>
}
