import type { Trend } from '~/advice/trend';

const MARK: Record<Trend, string> = {
  rising: 'M2 13 13 3M7 3H13V9',
  falling: 'M2 3 13 13M13 7V13H7',
  level: 'M1 8H14M10 4 14 8 10 12',
  unclear: 'M1 8H3.5M6.2 8H8.8M11.5 8H14',
};

/** Rising, falling, level or unclear: an arrow of its own beside the word, so that it is no verdict glyph. */
export function TrendWord({ trend }: { trend: Trend }) {
  return (
    <span className={`inline-flex items-center gap-[0.4em] ${trend === 'unclear' ? 'text-grey' : ''}`}>
      <svg
        viewBox="0 0 16 16"
        aria-hidden="true"
        focusable="false"
        className="h-[0.85em] w-[0.85em] flex-none"
      >
        <path
          d={MARK[trend]}
          fill="none"
          stroke="currentColor"
          strokeWidth="1.8"
          strokeLinecap="round"
          strokeLinejoin="round"
        />
      </svg>
      {trend}
    </span>
  );
}
