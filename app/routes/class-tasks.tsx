import { parseWithZod } from '@conform-to/zod/v4';
import type { SubmissionResult } from '@conform-to/react';
import { data, Form, href, Link } from 'react-router';
import { Breadcrumbs } from '~/components/breadcrumbs';
import { Button } from '~/components/button';
import { Checkbox } from '~/components/checkbox';
import { Disclosure } from '~/components/disclosure';
import { EmptyState } from '~/components/empty-state';
import { ErrorSummary } from '~/components/error-summary';
import { FigureList } from '~/components/figure-list';
import { changedMeanwhile } from '~/components/log/changed-meanwhile';
import { RadioRows } from '~/components/radio-rows';
import { SelectField } from '~/components/select-field';
import { taskFormSchema } from '~/components/tasks/task-schema';
import { keepingWords, kindWords, taskEvery } from '~/components/tasks/task-words';
import { TextField } from '~/components/text-field';
import { formatCalendarDate } from '~/format/date';
import { formatMoney } from '~/format/money';
import { formatNoun } from '~/format/number';
import { findAssetClass } from '~/models/asset-classes.server';
import { readClassHead } from '~/models/class-list.server';
import {
  addTask,
  describeTask,
  endTask,
  listTasks,
  readKeeping,
  type MaintenanceTask,
  type TaskResult,
} from '~/models/maintenance-tasks.server';
import { moneyFieldText } from '~/models/money';
import { taskKinds } from '~/models/task-kinds';
import { today } from '~/services/clock.server';
import { redirectWithToast } from '~/services/flash.server';
import { organisation, requireRole, requireViewer } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/class-tasks';

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Planned maintenance${loaderData ? ` of ${loaderData.head.name}` : ''} · Intervale` },
];

export async function loader({ context, request, params }: Route.LoaderArgs) {
  const viewer = requireViewer(context, request);
  const db = database();
  const head = await readClassHead(db, viewer.siteIds, params.classId);
  const assetClass = head && (await findAssetClass(db, head.id));
  if (head === null || !assetClass) throw new Response('There is no such class.', { status: 404 });
  const { currency, timeZone } = organisation(context);
  const day = today(timeZone);
  const tasks = await listTasks(db, head.id, day);
  const keeping = await Promise.all(tasks.map((task) => readKeeping(db, head.id, task, day)));
  return {
    head,
    clock: assetClass.clock,
    tasks: tasks.map((task, index) => ({ ...task, keeping: keepingWords(keeping[index] ?? null) })),
    mayEdit: viewer.roles.some((role) => role === 'lead' || role === 'admin'),
    isLead: viewer.roles.includes('lead'),
    currency,
    today: day,
  };
}

export async function action({ context, request, params }: Route.ActionArgs) {
  const viewer = requireRole(context, request, 'lead', 'admin');
  const db = database();
  const head = await readClassHead(db, 'all', params.classId);
  if (head === null) throw new Response('There is no such class.', { status: 404 });
  const { currency, timeZone } = organisation(context);
  const submission = parseWithZod(await request.formData(), { schema: taskFormSchema(currency) });
  if (submission.status !== 'success') return data(submission.reply(), { status: 400 });
  const form = submission.value;
  const page = href('/classes/:classId/tasks', { classId: head.id });
  const refuse = (status: 400 | 409, field: string, sentence: string) =>
    data(
      submission.reply(field === '' ? { formErrors: [sentence] } : { fieldErrors: { [field]: [sentence] } }),
      { status },
    );

  if (form.intent === 'add') {
    await addTask(db, { classId: head.id, task: { ...form, costMinor: form.cost }, personId: viewer.id });
    return redirectWithToast(page, { message: 'Added. The next night takes it in.' });
  }
  const change = { classId: head.id, taskId: form.taskId, version: form.version, personId: viewer.id };
  if (form.intent === 'describe') {
    const result = await describeTask(db, { ...change, ...form, costMinor: form.cost });
    return result.outcome === 'done'
      ? redirectWithToast(page, { message: 'Saved.' })
      : refuse(409, '', refusalOf(result, timeZone));
  }
  const task = (await listTasks(db, head.id, today(timeZone))).find(({ id }) => id === form.taskId);
  if (task && form.endsOn <= task.startsOn) {
    return refuse(400, 'endsOn', `It began on ${formatCalendarDate(task.startsOn)}: give a later day.`);
  }
  if (task?.statutoryReference && form.confirmed === undefined) {
    return refuse(400, 'confirmed', 'Confirm this first, or leave the task as it is.');
  }
  const result = await endTask(db, { ...change, endsOn: form.endsOn });
  return result.outcome === 'done'
    ? redirectWithToast(page, { message: 'Its end is set.' })
    : refuse(409, '', refusalOf(result, timeZone));
}

function refusalOf(result: Exclude<TaskResult, { outcome: 'done' }>, timeZone: string): string {
  return result.outcome === 'no-such-task'
    ? 'This task is not there any more. Load the page again.'
    : changedMeanwhile(result.lastChange, timeZone);
}

/** Who comes second is shown the tasks as the first one left them. */
export const shouldRevalidate = () => true;

type Loaded = Route.ComponentProps['loaderData'];
type Refused = SubmissionResult<string[]> | undefined;

export default function ClassTasks({ loaderData, actionData }: Route.ComponentProps) {
  const { head, tasks, mayEdit, today: day } = loaderData;
  const refused: Refused = actionData;
  const errors = Object.entries(refused?.error ?? {}).flatMap(([name, messages]) =>
    (messages ?? []).map((message) => ({ fieldId: name === '' ? null : name, message })),
  );
  const isOver = ({ endsOn }: MaintenanceTask) => endsOn !== null && endsOn <= day;
  const inForce = tasks.filter((task) => !isOver(task));
  const over = tasks.filter(isOver);
  return (
    <div className="max-w-[46rem]">
      <Breadcrumbs
        crumbs={[
          { label: 'Classes', to: href('/classes') },
          { label: head.name, to: href('/classes/:classId', { classId: head.id }) },
          { label: 'Planned maintenance' },
        ]}
      />
      <h1>Planned maintenance</h1>
      <p className="text-grey">
        What is done to {head.itemPlural} by plan, and how well it is kept: the share of visits within a tenth
        of the interval from when they were due. Assets that hold several items are left out of that.
      </p>
      <ErrorSummary errors={errors} title="Nothing was changed" />
      {inForce.length === 0 && (
        <EmptyState title="Nothing is planned">
          {head.itemPlural} run to failure, as far as is known here.
        </EmptyState>
      )}
      <ul>
        {inForce.map((task) => (
          <li key={task.id} className="border-hair border-b py-5">
            <Task task={task} loaderData={loaderData} refused={refused} />
          </li>
        ))}
      </ul>
      {mayEdit && (
        <div className="mt-6">
          <Disclosure summary="Add a task" open={refused?.initialValue?.intent === 'add'}>
            <AddForm loaderData={loaderData} refused={refused} />
          </Disclosure>
        </div>
      )}
      {over.length > 0 && (
        <section aria-labelledby="history" className="mt-8">
          <h2 id="history">What was planned before</h2>
          <ol className="mt-2">
            {over.map((task) => (
              <li key={task.id} className="border-hair border-b py-3">
                <b>{task.name}</b>, {kindWords[task.kind]} {taskEvery(task)}
                <span className="text-grey block text-[0.92rem]">
                  {formatCalendarDate(task.startsOn)} to {formatCalendarDate(task.endsOn ?? '')};{' '}
                  {task.keeping}
                </span>
              </li>
            ))}
          </ol>
        </section>
      )}
    </div>
  );
}

function Task({
  task,
  loaderData,
  refused,
}: {
  task: Loaded['tasks'][number];
  loaderData: Loaded;
  refused: Refused;
}) {
  const { head, mayEdit, isLead, currency, today: day } = loaderData;
  const renews = task.kind === 'replace' || task.kind === 'restore';
  return (
    <>
      <h2>{task.name}</h2>
      <FigureList
        items={[
          { name: 'What', value: `${kindWords[task.kind]} ${taskEvery(task)}` },
          {
            name: 'For',
            value: task.assets === 0 ? 'the whole class' : `${formatNoun(task.assets, 'asset')}, as a trial`,
          },
          {
            name: 'In force',
            value: `${task.startsOn > day ? 'from' : 'since'} ${formatCalendarDate(task.startsOn)}${task.endsOn === null ? '' : `, until ${formatCalendarDate(task.endsOn)}`}`,
          },
          { name: 'How well kept', value: task.keeping },
          {
            name: 'Cost of one',
            value: task.costMinor === null ? 'not given' : formatMoney(task.costMinor, currency),
          },
          ...(task.statutoryReference === null
            ? []
            : [
                {
                  name: 'Asked for by',
                  value: <span className="text-danger">{task.statutoryReference}</span>,
                },
              ]),
        ]}
      />
      {renews && task.assets === 0 && isLead && (
        <p className="mt-3">
          <Link
            to={href('/classes/:classId/change', { classId: head.id })}
            className="inline-flex min-h-11 items-center"
          >
            Put another interval forward
          </Link>
        </p>
      )}
      {mayEdit && (
        <div className="mt-2">
          <Disclosure summary="Name, cost, reference" open={isAbout(refused, 'describe', task.id)}>
            <DescribeForm task={task} currency={currency} refused={ownOf(refused, 'describe', task.id)} />
          </Disclosure>
          {task.endsOn === null && (
            <Disclosure summary="End it" open={isAbout(refused, 'end', task.id)}>
              <EndForm task={task} today={day} refused={ownOf(refused, 'end', task.id)} />
            </Disclosure>
          )}
        </div>
      )}
    </>
  );
}

const isAbout = (refused: Refused, intent: string, taskId: string) =>
  refused?.initialValue?.intent === intent && refused.initialValue.taskId === taskId;
const ownOf = (refused: Refused, intent: string, taskId: string) =>
  isAbout(refused, intent, taskId) ? refused : undefined;

const textOf = (refused: Refused, name: string): string | undefined => {
  const value = refused?.initialValue?.[name];
  return typeof value === 'string' ? value : undefined;
};
const errorsOf = (refused: Refused, name: string) => refused?.error?.[name] ?? undefined;

function DescribeForm({
  task,
  currency,
  refused,
}: {
  task: MaintenanceTask;
  currency: string;
  refused: Refused;
}) {
  return (
    <Form method="post" key={task.version}>
      <input type="hidden" name="taskId" value={task.id} />
      <input type="hidden" name="version" value={task.version} />
      <DescribedFields
        idPrefix={task.id}
        name={textOf(refused, 'name') ?? task.name}
        cost={
          textOf(refused, 'cost') ?? (task.costMinor === null ? '' : moneyFieldText(task.costMinor, currency))
        }
        statutoryReference={textOf(refused, 'statutoryReference') ?? task.statutoryReference ?? ''}
        currency={currency}
        refused={refused}
      />
      <Button name="intent" value="describe" tone="quiet">
        Save
      </Button>
    </Form>
  );
}

interface DescribedFieldsProps {
  idPrefix: string;
  name?: string;
  cost?: string;
  statutoryReference?: string;
  currency: string;
  refused: Refused;
}

function DescribedFields({
  idPrefix,
  name,
  cost,
  statutoryReference,
  currency,
  refused,
}: DescribedFieldsProps) {
  return (
    <>
      <TextField
        name="name"
        id={`${idPrefix}-name`}
        label="Name"
        defaultValue={name}
        maxLength={120}
        errors={errorsOf(refused, 'name')}
      />
      <TextField
        name="cost"
        id={`${idPrefix}-cost`}
        label={`Cost of one, ${currency}`}
        hint="Empty where nobody knows."
        inputMode="decimal"
        defaultValue={cost}
        maxLength={20}
        errors={errorsOf(refused, 'cost')}
      />
      <TextField
        name="statutoryReference"
        id={`${idPrefix}-reference`}
        label="Law or code that asks for it"
        hint="Empty where none does."
        defaultValue={statutoryReference}
        maxLength={300}
        errors={errorsOf(refused, 'statutoryReference')}
      />
    </>
  );
}

function EndForm({ task, today: day, refused }: { task: MaintenanceTask; today: string; refused: Refused }) {
  return (
    <Form method="post" key={task.version}>
      <input type="hidden" name="taskId" value={task.id} />
      <input type="hidden" name="version" value={task.version} />
      <TextField
        type="date"
        name="endsOn"
        id={`${task.id}-ends`}
        label="The first day on which it is no longer done"
        defaultValue={textOf(refused, 'endsOn') ?? day}
        errors={errorsOf(refused, 'endsOn')}
      />
      {task.statutoryReference !== null && (
        <Checkbox
          name="confirmed"
          id={`${task.id}-confirmed`}
          label={`${task.statutoryReference} asks for this. Whoever answers for the local code, and a licensed practitioner, have agreed that it ends.`}
          errors={errorsOf(refused, 'confirmed')}
        />
      )}
      <Button name="intent" value="end" tone="danger">
        End it
      </Button>
    </Form>
  );
}

function AddForm({ loaderData, refused }: { loaderData: Loaded; refused: Refused }) {
  const { currency, clock, today: day } = loaderData;
  const own = refused?.initialValue?.intent === 'add' ? refused : undefined;
  const units = ['days', 'weeks', 'months', 'years', ...(clock === 'operating-hours' ? ['hours'] : [])];
  return (
    <Form method="post">
      <RadioRows
        name="kind"
        label="What is done"
        defaultValue={textOf(own, 'kind')}
        errors={errorsOf(own, 'kind')}
        rows={taskKinds.map((kind) => ({ value: kind, label: kindWords[kind] }))}
      />
      <div className="grid gap-x-5 sm:grid-cols-2">
        <TextField
          name="interval"
          label="Every"
          inputMode="decimal"
          maxLength={12}
          defaultValue={textOf(own, 'interval')}
          errors={errorsOf(own, 'interval')}
        />
        <SelectField
          name="unit"
          label="Unit"
          defaultValue={textOf(own, 'unit') ?? 'months'}
          options={units.map((unit) => ({ value: unit, label: unit }))}
        />
      </div>
      <DescribedFields
        idPrefix="new"
        name={textOf(own, 'name')}
        cost={textOf(own, 'cost')}
        statutoryReference={textOf(own, 'statutoryReference')}
        currency={currency}
        refused={own}
      />
      <TextField
        type="date"
        name="startsOn"
        label="From which day it holds"
        hint="The day it really began, if it is done already."
        defaultValue={textOf(own, 'startsOn') ?? day}
        errors={errorsOf(own, 'startsOn')}
      />
      <Button name="intent" value="add">
        Add
      </Button>
    </Form>
  );
}
