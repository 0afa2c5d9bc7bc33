import { useForm } from '@conform-to/react';
import { parseWithZod } from '@conform-to/zod/v4';
import { data, Form, href, Link, redirect, useRouteLoaderData, type HeadersArgs } from 'react-router';
import { z } from 'zod';
import { Button } from '~/components/button';
import { Notice } from '~/components/notice';
import { Page } from '~/components/page';
import { TextField } from '~/components/text-field';
import { ThemeSwitch } from '~/components/theme-switch';
import type { loader as rootLoader } from '~/root';
import { roleWords } from '~/models/people.server';
import { ownPath } from '~/services/own-path.server';
import { passwordMaxLength } from '~/services/password.server';
import { clientAddress } from '~/services/request-origin.server';
import { settings } from '~/services/settings.server';
import { signIn } from '~/services/sign-in.server';
import { viewerContext } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/sign-in';

const formSchema = z.object({
  email: z
    .string({ error: 'Enter your e-mail address.' })
    .trim()
    .max(254, 'This is too long for an e-mail address.'),
  password: z
    .string({ error: 'Enter your password.' })
    .max(passwordMaxLength, `A password has at most ${passwordMaxLength} characters.`),
  next: z.string().optional(),
});

export function loader({ context, request }: Route.LoaderArgs) {
  const { searchParams } = new URL(request.url);
  const next = ownPath(searchParams.get('next'));
  if (context.get(viewerContext)) throw redirect(next);
  const { demoPeople } = settings();
  return {
    next,
    demoPeople: demoPeople.map(({ name, role, email }) => ({ name, role: roleWords[role], email })),
    chosen: demoPeople.find(({ email }) => email === searchParams.get('as')) ?? null,
  };
}

export async function action({ request }: Route.ActionArgs) {
  const submission = parseWithZod(await request.formData(), { schema: formSchema });
  if (submission.status !== 'success') {
    return data(submission.reply({ hideFields: ['password'] }), { status: 400 });
  }
  const { email, password, next } = submission.value;
  const result = await signIn(database(), request, { email, password, address: clientAddress(request) });

  switch (result.outcome) {
    case 'signed-in':
      throw redirect(ownPath(next), { headers: { 'Set-Cookie': result.setCookie } });
    case 'refused': {
      const formErrors = ['This e-mail and password do not go together, or the account is closed.'];
      return data(submission.reply({ hideFields: ['password'], formErrors }), { status: 400 });
    }
    case 'wait': {
      const formErrors = [`Too many tries. Wait ${inMinutes(result.seconds)}.`];
      return data(submission.reply({ hideFields: ['password'], formErrors }), {
        status: 429,
        headers: { 'Retry-After': String(result.seconds) },
      });
    }
  }
}

function inMinutes(seconds: number): string {
  const minutes = Math.ceil(seconds / 60);
  return minutes === 1 ? '1 minute' : `${minutes} minutes`;
}

export function headers({ actionHeaders }: HeadersArgs) {
  return actionHeaders;
}

export const meta: Route.MetaFunction = () => [{ title: 'Sign in · Intervale' }];

export default function SignIn({ loaderData, actionData }: Route.ComponentProps) {
  const { next, demoPeople, chosen } = loaderData;
  const root = useRouteLoaderData<typeof rootLoader>('root');
  const [form, fields] = useForm({
    // A form of its own for each person of the demo, so that choosing one fills it in afresh.
    id: `sign-in${chosen ? `-${chosen.email.replace(/\W/g, '-')}` : ''}`,
    lastResult: actionData,
    defaultValue: { email: chosen?.email, password: chosen?.password, next },
  });
  const returnTo = `${href('/sign-in')}?${new URLSearchParams({ next })}`;
  return (
    <Page
      homeTo="/"
      links={[]}
      themeSwitch={<ThemeSwitch current={root?.theme ?? 'auto'} returnTo={returnTo} />}
    >
      <div className="max-w-112">
        <h1>Sign in</h1>
        {form.errors && (
          <div id={form.errorId}>
            <Notice tone="danger" title="You are not signed in" announce>
              {form.errors.join(' ')}
            </Notice>
          </div>
        )}
        <Form
          key={form.id}
          id={form.id}
          onSubmit={form.onSubmit}
          method="post"
          action={href('/sign-in')}
          noValidate
        >
          <input type="hidden" name={fields.next.name} defaultValue={fields.next.initialValue} />
          <TextField
            name={fields.email.name}
            id={fields.email.id}
            label="E-mail"
            errors={fields.email.errors}
            type="email"
            autoComplete="username"
            autoCapitalize="none"
            spellCheck={false}
            required
            defaultValue={fields.email.initialValue}
          />
          <TextField
            name={fields.password.name}
            id={fields.password.id}
            label="Password"
            errors={fields.password.errors}
            type="password"
            autoComplete="current-password"
            required
            defaultValue={fields.password.initialValue}
          />
          <div className="mt-6">
            <Button>Sign in</Button>
          </div>
        </Form>
        {demoPeople.length > 0 && <DemoPeople people={demoPeople} next={next} />}
      </div>
    </Page>
  );
}

interface DemoPeopleProps {
  people: readonly { name: string; role: string; email: string }[];
  next: string;
}

function DemoPeople({ people, next }: DemoPeopleProps) {
  return (
    <section aria-labelledby="demo-people" className="border-hair mt-10 border-t pt-5">
      <h2 id="demo-people">Demonstration</h2>
      <p className="text-grey mt-1 text-[0.9rem]">Choose a person to fill in the form with.</p>
      <ul className="mt-2">
        {people.map(({ name, role, email }) => (
          <li key={email} className="border-hair border-b">
            <Link
              to={`${href('/sign-in')}?${new URLSearchParams({ next, as: email })}`}
              className="flex min-h-11 flex-wrap items-center justify-between gap-x-4 py-1 no-underline max-md:min-h-13"
            >
              <span className="underline">{name}</span>
              <span className="text-grey text-[0.9rem]">{role}</span>
            </Link>
          </li>
        ))}
      </ul>
    </section>
  );
}
