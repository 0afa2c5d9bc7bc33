import type { ReactNode } from 'react';
import { Link } from 'react-router';

export interface SectionLink {
  to: string;
  /** One or two real words; at most five links fit a phone. */
  label: string;
  current: boolean;
}

interface PageProps {
  /** Where the name of the product leads. */
  homeTo: string;
  links: readonly SectionLink[];
  /** Sections that find no place beside the others: they stand in the person's menu. */
  moreLinks?: readonly SectionLink[];
  /** Whether a page that was asked for is still not there after a second. */
  isLate?: boolean;
  /** Who is signed in; nobody on the sign-in page. */
  person?: { name: string; role: string };
  /** A form that signs out. */
  signOut?: ReactNode;
  themeSwitch?: ReactNode;
  /** A search box for the top of every page. */
  search?: ReactNode;
  /** What has just been done. */
  toast?: ReactNode;
  children: ReactNode;
}

/**
 * The frame of every page: name, main sections, person, then the page's own content in `main`. The list of
 * sections stands along the top at a desk and along the bottom of a phone.
 */
export function Page(props: PageProps) {
  const { homeTo, links, moreLinks = [], isLate = false, person, signOut } = props;
  const { themeSwitch, search, toast, children } = props;
  const hasMenu = person !== undefined || signOut != null || themeSwitch != null;
  return (
    <div className={links.length > 0 ? 'has-sections' : undefined}>
      <a
        href="#content"
        className="bg-ink text-paper absolute left-2 z-40 -translate-y-20 px-4 py-3 font-bold focus:translate-y-2 focus-visible:outline-offset-0"
      >
        Skip to content
      </a>
      <header className="top">
        <Link to={homeTo} className="top-brand">
          <Mark />
          Intervale
        </Link>
        {links.length > 0 && <Sections links={links} />}
        {search}
        {hasMenu && (
          <details className="top-person">
            <summary>{person?.name ?? 'Theme'}</summary>
            <div className="top-menu">
              {person !== undefined && (
                <p className="mb-2">
                  <b>{person.name}</b>
                  <br />
                  <span className="text-grey text-[0.9rem]">{person.role}</span>
                </p>
              )}
              {moreLinks.length > 0 && (
                <ul className="border-hair mb-2 border-t pt-1">
                  {moreLinks.map(({ to, label, current }) => (
                    <li key={to}>
                      <Link
                        to={to}
                        aria-current={current ? 'page' : undefined}
                        className="inline-flex min-h-11 items-center"
                      >
                        {label}
                      </Link>
                    </li>
                  ))}
                </ul>
              )}
              {themeSwitch}
              {signOut}
            </div>
          </details>
        )}
      </header>
      <div className="late" data-late={isLate || undefined} aria-live="polite">
        {isLate && <span className="sr-only">Still loading</span>}
      </div>
      {toast}
      <main
        id="content"
        tabIndex={-1}
        className="mx-auto max-w-[64rem] px-[1.05rem] pt-6 pb-12 md:px-[2.35rem] md:pt-9"
      >
        {children}
      </main>
    </div>
  );
}

function Sections({ links }: { links: readonly SectionLink[] }) {
  return (
    <nav aria-label="Main sections" className="sections">
      <ul>
        {links.map(({ to, label, current }) => (
          <li key={to}>
            <Link to={to} aria-current={current ? 'page' : undefined}>
              {label}
            </Link>
          </li>
        ))}
      </ul>
    </nav>
  );
}

/** An interval between two failures: two ticks and the span between them. */
function Mark() {
  return (
    <svg viewBox="0 0 26 16" aria-hidden="true" focusable="false" className="w-[1.35em]">
      <path
        d="M3 1V15M23 1V15M3 8H23"
        fill="none"
        stroke="currentColor"
        strokeWidth="2.6"
        strokeLinecap="square"
      />
    </svg>
  );
}
