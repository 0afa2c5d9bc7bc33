import type { SubmissionResult } from '@conform-to/react';
import { parseWithZod } from '@conform-to/zod/v4';
import { useEffect, useRef } from 'react';
import { data, href } from 'react-router';
import { z } from 'zod';
import { Breadcrumbs } from '~/components/breadcrumbs';
import { ModesEditor } from '~/components/class-settings/modes-editor';
import { clockInUse, SettingsForm } from '~/components/class-settings/settings-form';
import { settingsFormSchema, settingsOfForm } from '~/components/class-settings/settings-schema';
import { settingLabels, settingWords } from '~/components/class-settings/setting-words';
import { changedMeanwhile } from '~/components/log/changed-meanwhile';
import { Notice } from '~/components/notice';
import {
  type ClassSettings,
  type ConfirmedChange,
  findAssetClass,
  readClockUse,
  saveClassSettings,
  settingNames,
} from '~/models/asset-classes.server';
import {
  addFailureMode,
  listFailureModes,
  ModeChangedError,
  ModeNameTakenError,
  renameFailureMode,
} from '~/models/failure-modes.server';
import { now } from '~/services/clock.server';
import { redirectWithToast } from '~/services/flash.server';
import { organisation, requireRole } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/class-settings';

export async function loader({ context, request, params }: Route.LoaderArgs) {
  requireRole(context, request, 'lead', 'admin');
  const db = database();
  const assetClass = await classOf(params.classId);
  const [modes, clockUse] = await Promise.all([
    listFailureModes(db, assetClass.id),
    readClockUse(db, assetClass.id),
  ]);
  return { assetClass, modes, clockUse, currency: organisation(context).currency };
}

export async function action({ context, request, params }: Route.ActionArgs) {
  const viewer = requireRole(context, request, 'lead', 'admin');
  const { currency, timeZone } = organisation(context);
  const { id: classId } = await classOf(params.classId);
  const page = href('/classes/:classId/settings', { classId });

  const submission = parseWithZod(await request.formData(), { schema: settingsFormSchema(currency) });
  if (submission.status !== 'success') return refuse(400, { form: submission.reply() });
  const form = submission.value;

  if (form.intent !== 'save') {
    const change = { classId, name: form.modeName, personId: viewer.id };
    try {
      if (form.intent === 'add-mode') await addFailureMode(database(), change);
      else await renameFailureMode(database(), { ...change, modeId: form.modeId, seenName: form.seenName });
    } catch (error) {
      const sentence = modeSentence(error, form.modeName);
      if (sentence === undefined) throw error;
      return refuse(409, { form: submission.reply({ fieldErrors: { modeName: [sentence] } }) });
    }
    return redirectWithToast(page, { message: form.intent === 'add-mode' ? 'Mode added.' : 'Mode renamed.' });
  }

  const settings = settingsOfForm(form);
  const result = await saveClassSettings(database(), {
    classId,
    version: form.version,
    settings,
    confirmed: form.confirm,
    personId: viewer.id,
    now: now(),
  });
  switch (result.outcome) {
    case 'saved':
      return redirectWithToast(page, { message: 'Saved.' });
    case 'unchanged':
      return redirectWithToast(page, { message: 'Nothing was different, nothing was saved.' });
    case 'not-found':
      throw notFound();
    case 'name-taken': {
      const sentence = `There is another class called “${form.name}”. Choose another name.`;
      return refuse(409, { form: submission.reply({ fieldErrors: { name: [sentence] } }) });
    }
    case 'clock-in-use':
      return refuse(409, {
        form: submission.reply({ fieldErrors: { clock: [clockInUse(result.agesRecorded)] } }),
      });
    case 'unconfirmed':
      return refuse(409, { form: submission.reply(), unconfirmed: result.changes });
    case 'changed-meanwhile':
      return refuse(409, {
        form: submission.reply(),
        meanwhile: {
          version: result.current.version,
          sentence: changedMeanwhile(result.lastChange, timeZone),
          differences: differences(result.current, settings, currency),
        },
      });
  }
}

interface Refusal {
  form: SubmissionResult<string[]>;
  unconfirmed?: ConfirmedChange[];
  /** Somebody saved first: what is stored now beside what was sent, where they differ. */
  meanwhile?: {
    version: number;
    sentence: string;
    differences: { label: string; stored: string; yours: string }[];
  };
}

function refuse(status: 400 | 409, refusal: Refusal) {
  return data(refusal, { status });
}

function differences(stored: ClassSettings, yours: ClassSettings, currency: string) {
  return settingNames
    .filter((name) => stored[name] !== yours[name])
    .map((name) => ({
      label: settingLabels[name],
      stored: settingWords(stored, name, currency),
      yours: settingWords(yours, name, currency),
    }));
}

function modeSentence(error: unknown, name: string): string | undefined {
  if (error instanceof ModeNameTakenError) return `This class has a mode called “${name}” already.`;
  if (!(error instanceof ModeChangedError)) return undefined;
  return error.currentName === undefined
    ? 'This mode is not in this class.'
    : `Somebody renamed it to “${error.currentName}” meanwhile. Look again, then rename it if it is still wrong.`;
}

async function classOf(classId: string) {
  const assetClass = z.uuid().safeParse(classId).success
    ? await findAssetClass(database(), classId)
    : undefined;
  if (!assetClass) throw notFound();
  return assetClass;
}

const notFound = () => new Response('There is nothing here.', { status: 404, statusText: 'Not found' });

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Settings${loaderData ? ` of ${loaderData.assetClass.name}` : ''} · Intervale` },
];

export default function ClassSettingsPage({ loaderData, actionData }: Route.ComponentProps) {
  const { assetClass, modes, clockUse, currency } = loaderData;
  const sent = actionData?.form.initialValue;
  const aboutMode = sent?.intent === 'add-mode' || sent?.intent === 'rename-mode';
  const { meanwhile, unconfirmed = [] } = actionData ?? {};
  return (
    <div className="max-w-[44rem]">
      <Breadcrumbs
        crumbs={[
          { label: 'Classes', to: href('/classes') },
          { label: assetClass.name, to: href('/classes/:classId', { classId: assetClass.id }) },
          { label: 'Settings' },
        ]}
      />
      <h1 className="mt-2">Settings of {assetClass.name}</h1>
      {meanwhile && <ChangedMeanwhile {...meanwhile} />}
      <SettingsForm
        key={`settings-${assetClass.id}`}
        assetClass={assetClass}
        version={meanwhile?.version ?? sentVersion(sent?.version) ?? assetClass.version}
        currency={currency}
        clockUse={clockUse}
        lastResult={aboutMode ? undefined : actionData?.form}
        unconfirmed={unconfirmed}
      />
      <h2 className="mt-12">What can fail</h2>
      <ModesEditor
        modes={modes}
        refused={
          aboutMode
            ? {
                modeId: typeof sent.modeId === 'string' ? sent.modeId : null,
                text: typeof sent.modeName === 'string' ? sent.modeName : '',
                errors: actionData?.form.error?.modeName ?? [],
              }
            : undefined
        }
      />
    </div>
  );
}

/** A form that came back still speaks of the version its person saw, whatever was stored since. */
function sentVersion(version: unknown): number | undefined {
  return typeof version === 'string' && /^\d+$/.test(version) ? Number(version) : undefined;
}

/** Takes the eye, and the focus, to what somebody else stored first. */
function ChangedMeanwhile({ sentence, differences }: NonNullable<Refusal['meanwhile']>) {
  const notice = useRef<HTMLDivElement>(null);
  useEffect(() => notice.current?.focus(), [sentence]);
  return (
    <div ref={notice} tabIndex={-1}>
      <Notice tone="warning" title="Not saved: somebody else was first">
        <p>{sentence}</p>
        <ul className="mt-1 list-disc pl-5">
          {differences.map(({ label, stored, yours }) => (
            <li key={label}>
              {label}: {stored} is stored, you have {yours}
            </li>
          ))}
        </ul>
        <p className="mt-1">What you typed is still below. Saving again stores it as it stands there.</p>
      </Notice>
    </div>
  );
}
