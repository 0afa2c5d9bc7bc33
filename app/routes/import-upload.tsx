import { useState, type ChangeEvent } from 'react';
import { data, Form, href, redirect, useNavigation } from 'react-router';
import { z } from 'zod';
import { ActionBar } from '~/components/action-bar';
import { Breadcrumbs } from '~/components/breadcrumbs';
import { Button } from '~/components/button';
import { ErrorSummary } from '~/components/error-summary';
import { CONTROL_CLASS, Field } from '~/components/field';
import { ColumnList } from '~/components/imports/column-list';
import { formatBytes } from '~/components/imports/import-words';
import { Notice } from '~/components/notice';
import { RadioRows } from '~/components/radio-rows';
import { ImportFileError, importKinds, type ImportKind } from '~/models/import-types';
import { beginImport, importMaxBytes } from '~/models/imports.server';
import { today } from '~/services/clock.server';
import { BrokenUploadError, receiveUpload } from '~/services/import-upload.server';
import { organisation, requireRole } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/import-upload';

const kindSchema = z.enum(importKinds);

/** Most files are staged within this: their preview is then the next thing seen. */
const patienceMilliseconds = 1500;

export function loader({ context, request }: Route.LoaderArgs) {
  requireRole(context, request, 'lead', 'admin');
  const kind = kindSchema.catch('register').parse(new URL(request.url).searchParams.get('kind'));
  return { kind, maxBytes: importMaxBytes };
}

export async function action({ context, request }: Route.ActionArgs) {
  const viewer = requireRole(context, request, 'lead', 'admin');
  const { timeZone } = organisation(context);
  let kind: ImportKind | undefined;
  const refuse = (errors: { kind?: string; file?: string }) => data({ kind, errors }, { status: 400 });
  try {
    const { fields, result: begun } = await receiveUpload(request, async (file) => {
      kind = kindSchema.safeParse(file.fields.kind).data;
      if (kind === undefined) return undefined;
      return beginImport(database(), {
        kind,
        fileName: file.fileName,
        stream: file.stream,
        personId: viewer.id,
        today: today(timeZone),
      });
    });
    kind = kindSchema.safeParse(fields.kind).data;
    if (kind === undefined) return refuse({ kind: 'Say whether this is a register or a history.' });
    if (begun === undefined) return refuse({ file: 'Choose a file.' });
    begun.staged.catch((error: unknown) => console.error(`The import ${begun.importId} stopped:`, error));
    const patience = new Promise((resolve) => setTimeout(resolve, patienceMilliseconds));
    await Promise.race([begun.staged.catch(() => undefined), patience]);
    return redirect(href('/imports/:importId', { importId: begun.importId }));
  } catch (error) {
    if (error instanceof ImportFileError || error instanceof BrokenUploadError)
      return refuse({ file: error.message });
    throw error;
  }
}

export const meta: Route.MetaFunction = () => [{ title: 'Import a file · Intervale' }];

export default function ImportUpload({ loaderData, actionData }: Route.ComponentProps) {
  const { kind, maxBytes } = loaderData;
  const [chosen, setChosen] = useState<{ name: string; size: number }>();
  const navigation = useNavigation();
  const uploading = navigation.state !== 'idle' && navigation.formMethod === 'POST';
  const tooLarge = chosen !== undefined && chosen.size > maxBytes;
  const tooLargeError = `This file has ${formatBytes(chosen?.size ?? 0)}; at most ${formatBytes(maxBytes)} are taken. Split it into several.`;
  const fileErrors = tooLarge ? [tooLargeError] : textsOf(actionData?.errors.file);
  const kindErrors = textsOf(actionData?.errors.kind);
  const noteFile = ({ target }: ChangeEvent<HTMLInputElement>) => setChosen(target.files?.[0]);
  return (
    <>
      <Breadcrumbs crumbs={[{ label: 'Imports', to: href('/imports') }, { label: 'Import a file' }]} />
      <h1>Import a file</h1>
      {!uploading && (
        <ErrorSummary
          title="The file was not taken"
          errors={[
            ...kindErrors.map((message) => ({ fieldId: 'kind', message })),
            ...fileErrors.map((message) => ({ fieldId: 'file', message })),
          ]}
        />
      )}
      <Form method="post" encType="multipart/form-data" className="max-w-[40rem]">
        <RadioRows
          name="kind"
          label="What is in it?"
          defaultValue={actionData?.kind ?? kind}
          errors={kindErrors}
          rows={[
            { value: 'register', label: 'Register: the assets, where they are, since when' },
            { value: 'history', label: 'History: their failures and planned work' },
          ]}
        />
        <Field
          name="file"
          label="CSV file"
          hint={`UTF-8, at most ${formatBytes(maxBytes)}.`}
          errors={uploading ? [] : fileErrors}
        >
          {(control) => (
            <input
              type="file"
              name="file"
              accept=".csv,.tsv,.txt,text/csv,text/plain"
              onChange={noteFile}
              {...control}
              className={`${CONTROL_CLASS} file:mr-3 file:border-0 file:bg-transparent file:font-bold file:text-current file:underline`}
            />
          )}
        </Field>
        <ActionBar note="Nothing is written yet: next you see what would change.">
          <Button disabled={uploading || tooLarge}>{uploading ? 'Uploading…' : 'Upload and look'}</Button>
        </ActionBar>
        <div role="status">
          {uploading && (
            <Notice
              title={`Uploading ${chosen ? `${chosen.name}, ${formatBytes(chosen.size)}` : 'the file'}`}
            >
              Keep this page open until the rows are shown.
              <progress className="mt-2 block w-full" aria-label="Uploading" />
            </Notice>
          )}
        </div>
      </Form>
      <h2 className="mt-10">What a file looks like</h2>
      <div className="mt-2 max-w-[52rem]">
        <ColumnList kind="register" />
        <ColumnList kind="history" />
      </div>
    </>
  );
}

function textsOf(error: string | undefined): string[] {
  return error === undefined ? [] : [error];
}
