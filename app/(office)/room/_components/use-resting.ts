import { useEffect, useState } from 'react'

/** A turned dial asks once it rests. */
const REST_MS = 200

/** A value as it was when it last stood still for a moment. */
export function useResting<Value>(value: Value): Value {
  const [resting, setResting] = useState(value)
  useEffect(() => {
    const timer = setTimeout(() => setResting(value), REST_MS)
    return () => clearTimeout(timer)
  }, [value])
  return resting
}
