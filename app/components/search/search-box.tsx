import { useEffect, useId, useRef, useState, type KeyboardEvent } from 'react';
import { Form, href, useFetcher, useNavigate } from 'react-router';
import { foundPath } from './found-path';

interface Suggestion {
  kind: 'class' | 'asset';
  id: string;
  name: string;
  detail: string;
}

/** Wait after the last key before asking, so that fast typing asks once. */
const pauseMilliseconds = 150;

/**
 * Finds classes and assets from any page: `/` comes here, arrows and Enter choose, Escape leaves. Without
 * JavaScript it is a form that leads to the page of results. The combobox pattern of the WAI-ARIA practices.
 */
export function SearchBox() {
  const id = useId();
  const input = useRef<HTMLInputElement>(null);
  const fetcher = useFetcher<{ query: string; found: Suggestion[] }>();
  const navigate = useNavigate();
  const [query, setQuery] = useState('');
  const [isOpen, setIsOpen] = useState(false);
  const [active, setActive] = useState(-1);
  useSlashKey(input);

  const { load } = fetcher;
  useEffect(() => {
    if (query.trim() === '') return;
    const timer = setTimeout(() => {
      void load(`${href('/search')}?${new URLSearchParams({ q: query, suggest: '1' })}`);
    }, pauseMilliseconds);
    return () => clearTimeout(timer);
  }, [query, load]);

  const found = query.trim() !== '' && fetcher.data?.query === query ? fetcher.data.found : [];
  const isShown = isOpen && found.length > 0;
  const leave = () => {
    setIsOpen(false);
    setActive(-1);
  };
  const choose = (one: Suggestion) => {
    leave();
    setQuery('');
    void navigate(foundPath(one));
  };
  const onKeyDown = (event: KeyboardEvent) => {
    if (event.key === 'Escape') {
      if (isShown) event.preventDefault();
      leave();
      return;
    }
    if (!isShown) return;
    const step = { ArrowDown: 1, ArrowUp: -1 }[event.key];
    if (step !== undefined) {
      event.preventDefault();
      setActive((held) => (held + step + found.length + (held === -1 && step === -1 ? 1 : 0)) % found.length);
    }
    const chosen = found[active];
    if (event.key === 'Enter' && chosen !== undefined) {
      event.preventDefault();
      choose(chosen);
    }
  };

  return (
    <Form role="search" action={href('/search')} className="search-box" onSubmit={leave}>
      <input
        ref={input}
        type="search"
        name="q"
        value={query}
        onChange={(event) => {
          setQuery(event.target.value);
          setIsOpen(true);
          setActive(-1);
        }}
        onKeyDown={onKeyDown}
        onFocus={() => setIsOpen(true)}
        onBlur={leave}
        role="combobox"
        aria-label="Search classes and assets"
        aria-expanded={isShown}
        aria-controls={`${id}-found`}
        aria-autocomplete="list"
        aria-activedescendant={isShown && active >= 0 ? `${id}-${active}` : undefined}
        aria-keyshortcuts="/"
        autoComplete="off"
        maxLength={80}
        placeholder="Search"
      />
      <ul id={`${id}-found`} role="listbox" aria-label="Found" hidden={!isShown}>
        {found.map((one, index) => (
          // The keyboard chooses through the box above, which keeps the focus.
          // eslint-disable-next-line jsx-a11y/click-events-have-key-events
          <li
            key={one.id}
            id={`${id}-${index}`}
            role="option"
            tabIndex={-1}
            aria-selected={index === active}
            onMouseDown={(event) => event.preventDefault()}
            onClick={() => choose(one)}
          >
            <b>{one.name}</b> <span className="text-grey">{one.detail}</span>
          </li>
        ))}
      </ul>
    </Form>
  );
}

/** `/` comes to the box from anywhere but where somebody types. */
function useSlashKey(input: React.RefObject<HTMLInputElement | null>): void {
  useEffect(() => {
    const onKey = (event: globalThis.KeyboardEvent) => {
      const { target } = event;
      const types =
        target instanceof HTMLElement && target.closest('input, textarea, select, [contenteditable]');
      if (event.key !== '/' || event.ctrlKey || event.metaKey || event.altKey || types) return;
      event.preventDefault();
      input.current?.focus();
    };
    document.addEventListener('keydown', onKey);
    return () => document.removeEventListener('keydown', onKey);
  }, [input]);
}
