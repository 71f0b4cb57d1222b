import { useEffect, useState } from 'react';

/** The value after it has been still for a while: for what is typed and then asked for. */
export function useLater<T>(value: T, quietMs: number): T {
  const [later, setLater] = useState(value);
  useEffect(() => {
    const timer = setTimeout(() => setLater(value), quietMs);
    return () => clearTimeout(timer);
  }, [value, quietMs]);
  return later;
}
