import { Count } from './count'

// Rendered for each request, as every page of Kilnward is.
export const dynamic = 'force-dynamic'

export default function Page() {
  return (
    <main>
      <h1>A bare page</h1>
      <Count />
    </main>
  )
}
