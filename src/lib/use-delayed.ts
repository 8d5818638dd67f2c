import { useEffect, useState } from 'react';

/** True once `value` has been true for `ms`: short work shows nothing, so nothing flickers. */
export function useDelayed(value: boolean, ms: number): boolean {
  const [isLong, setLong] = useState(false);
  useEffect(() => {
    const timer = setTimeout(() => setLong(value), value ? ms : 0);
    return () => clearTimeout(timer);
  }, [value, ms]);
  return value && isLong;
}
