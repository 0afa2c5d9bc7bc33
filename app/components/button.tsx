import type { ButtonHTMLAttributes, ReactNode } from 'react';
import { Link, type To } from 'react-router';

export type ButtonTone = 'main' | 'quiet' | 'danger';

const BASE =
  'inline-flex min-h-11 items-center justify-center gap-2 rounded px-5 py-2 text-center leading-tight font-bold no-underline max-md:min-h-13 max-md:w-full disabled:opacity-60';

const TONE: Record<ButtonTone, string> = {
  main: 'bg-ink text-paper border-[1.5px] border-ink hover:underline',
  quiet: 'border-[1.5px] border-ink text-ink hover:bg-pick',
  danger: 'border-[1.5px] border-danger text-danger hover:bg-pick',
};

interface ButtonProps extends ButtonHTMLAttributes<HTMLButtonElement> {
  tone?: ButtonTone;
}

/** A button; it submits its form unless told otherwise. On a phone it takes the full width. */
export function Button({ tone = 'main', className = '', type = 'submit', ...rest }: ButtonProps) {
  return <button type={type} className={`${BASE} ${TONE[tone]} ${className}`} {...rest} />;
}

interface LinkButtonProps {
  to: To;
  tone?: ButtonTone;
  className?: string;
  /** A full page load instead of a client-side one: downloads, other applications. */
  reloadDocument?: boolean;
  children: ReactNode;
}

/** A link that looks like a button: it goes somewhere and changes nothing. */
export function LinkButton({ to, tone = 'main', className = '', reloadDocument, children }: LinkButtonProps) {
  return (
    <Link to={to} reloadDocument={reloadDocument} className={`${BASE} ${TONE[tone]} ${className}`}>
      {children}
    </Link>
  );
}
