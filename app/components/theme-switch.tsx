import { Form } from 'react-router';

export type Theme = 'light' | 'night' | 'auto';

const CHOICES: readonly { theme: Theme; label: string }[] = [
  { theme: 'auto', label: 'As this device' },
  { theme: 'light', label: 'Light' },
  { theme: 'night', label: 'Night' },
];

interface ThemeSwitchProps {
  current: Theme;
  /** Where to come back to, a path of this application. */
  returnTo: string;
  action?: string;
}

/** Chooses the theme: posts `theme` and `returnTo` to /theme, which keeps it and comes back. */
export function ThemeSwitch({ current, returnTo, action = '/theme' }: ThemeSwitchProps) {
  return (
    <Form method="post" action={action} preventScrollReset>
      <fieldset>
        <legend className="text-grey text-[0.9rem]">Theme</legend>
        <input type="hidden" name="returnTo" value={returnTo} />
        <div className="flex flex-wrap gap-x-4">
          {CHOICES.map(({ theme, label }) => (
            <button
              key={theme}
              type="submit"
              name="theme"
              value={theme}
              aria-pressed={theme === current}
              className="min-h-11 underline-offset-4 aria-pressed:font-bold aria-pressed:underline aria-pressed:decoration-2"
            >
              {label}
            </button>
          ))}
        </div>
      </fieldset>
    </Form>
  );
}
