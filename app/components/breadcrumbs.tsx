import { Link } from 'react-router';

export interface Crumb {
  label: string;
  /** Left out for the page one is on. */
  to?: string;
}

/** The way down to this page. */
export function Breadcrumbs({ crumbs }: { crumbs: readonly Crumb[] }) {
  return (
    <nav aria-label="You are here" className="text-grey no-print text-[0.9rem]">
      <ol className="flex flex-wrap gap-x-2">
        {crumbs.map((crumb, index) => (
          <li key={`${crumb.label}-${index}`} className="flex items-center gap-x-2">
            {index > 0 && <span aria-hidden="true">/</span>}
            {crumb.to === undefined ? (
              <span aria-current={index === crumbs.length - 1 ? 'page' : undefined}>{crumb.label}</span>
            ) : (
              <Link to={crumb.to} className="inline-flex items-center text-current max-md:min-h-11">
                {crumb.label}
              </Link>
            )}
          </li>
        ))}
      </ol>
    </nav>
  );
}
