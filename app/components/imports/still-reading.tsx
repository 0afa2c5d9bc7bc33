import { useEffect } from 'react';
import { useRevalidator } from 'react-router';
import { formatNoun } from '~/format/number';
import { Notice } from '../notice';

const lookAgainMilliseconds = 1500;

/** How far the reading of a file is; looks again by itself, with and without JavaScript. */
export function StillReading({ rows }: { rows: number }) {
  const { revalidate } = useRevalidator();
  useEffect(() => {
    const timer = setInterval(() => void revalidate(), lookAgainMilliseconds);
    return () => clearInterval(timer);
  }, [revalidate]);
  return (
    <div role="status">
      <noscript>
        <meta httpEquiv="refresh" content="3" />
      </noscript>
      <Notice title="The file is being read">
        {formatNoun(rows, 'row')} so far. Nothing is written yet; you may leave this page and come back.
        <progress className="mt-2 block w-full max-w-112" aria-label="Reading" />
      </Notice>
    </div>
  );
}
