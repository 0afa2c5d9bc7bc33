import { Form } from 'react-router';
import { Button } from '~/components/button';
import { Disclosure } from '~/components/disclosure';
import { SelectField } from '~/components/select-field';
import { TextField } from '~/components/text-field';

interface RecordFilterProps {
  /** What the address says. */
  state: {
    site?: string;
    mode?: string;
    effect?: string;
    outside?: string;
    voided?: string;
    from?: string;
    to?: string;
    tag?: string;
  };
  sites: readonly { id: string; name: string }[];
  modes: readonly { id: string; name: string }[];
}

/** Narrows the table of failures; the address holds what was chosen. */
export function RecordFilter({ state, sites, modes }: RecordFilterProps) {
  const isFiltered = Object.entries(state).some(
    ([name, value]) => value !== undefined && !['sort', 'direction', 'page'].includes(name),
  );
  return (
    <Disclosure summary={isFiltered ? 'Filter (on)' : 'Filter'} open={isFiltered}>
      <Form className="grid gap-x-5 sm:grid-cols-2 lg:grid-cols-4" key={JSON.stringify(state)}>
        <TextField name="tag" label="Tag holds" defaultValue={state.tag} maxLength={60} />
        <SelectField
          name="site"
          label="Site"
          defaultValue={state.site ?? ''}
          emptyLabel="All"
          options={sites.map(({ id, name }) => ({ value: id, label: name }))}
        />
        <SelectField
          name="mode"
          label="Mode"
          defaultValue={state.mode ?? ''}
          emptyLabel="Any"
          options={[
            ...modes.map(({ id, name }) => ({ value: id, label: name })),
            { value: 'none', label: 'no mode' },
          ]}
        />
        <SelectField
          name="effect"
          label="What was done"
          defaultValue={state.effect ?? ''}
          emptyLabel="Either"
          options={[
            { value: 'renewed', label: 'renewed' },
            { value: 'patched', label: 'patched' },
          ]}
        />
        <SelectField
          name="outside"
          label="Outside cause"
          defaultValue={state.outside ?? ''}
          emptyLabel="Either"
          options={[
            { value: 'yes', label: 'with one' },
            { value: 'no', label: 'without' },
          ]}
        />
        <SelectField
          name="voided"
          label="Voided"
          defaultValue={state.voided ?? ''}
          emptyLabel="Those that count"
          options={[
            { value: 'yes', label: 'Voided ones' },
            { value: 'all', label: 'All' },
          ]}
        />
        <TextField type="date" name="from" label="From" defaultValue={state.from} />
        <TextField type="date" name="to" label="Up to" defaultValue={state.to} />
        <div>
          <Button tone="quiet">Show</Button>
        </div>
      </Form>
    </Disclosure>
  );
}
