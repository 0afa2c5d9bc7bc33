import { useEffect, useState } from 'react';
import { useNavigation } from 'react-router';

const secondMilliseconds = 1000;

/** True once a navigation has taken over a second, until it ends: quick ones show nothing. */
export function useIsLate(): boolean {
  const { state, location } = useNavigation();
  const [lateFor, setLateFor] = useState<unknown>(null);
  useEffect(() => {
    if (state === 'idle') return;
    const timer = setTimeout(() => setLateFor(location), secondMilliseconds);
    return () => clearTimeout(timer);
  }, [state, location]);
  return state !== 'idle' && lateFor === location;
}
