import { Form } from 'react-router';
import { Button } from '~/components/button';
import { Disclosure } from '~/components/disclosure';
import { SelectField } from '~/components/select-field';
import { TextField } from '~/components/text-field';
import { filterOf, type CleanState } from './list-state';

interface RecordFilterProps {
  /** What the address says. */
  state: CleanState;
  sites: readonly { id: string; name: string }[];
  modes: readonly { id: string; name: string }[];
}

/** Narrows the table of failures; the address holds what was chosen. Other forms of the page have fields of the same names. */
export function RecordFilter({ state, sites, modes }: RecordFilterProps) {
  const isFiltered = Object.values(filterOf(state)).some((value) => value !== undefined);
  return (
    <Disclosure summary={isFiltered ? 'Filter (on)' : 'Filter'} open={isFiltered}>
      <Form className="grid gap-x-5 sm:grid-cols-2 lg:grid-cols-4" key={JSON.stringify(state)}>
        <TextField name="tag" id="only-tag" label="Tag holds" defaultValue={state.tag} maxLength={60} />
        <SelectField
          name="site"
          id="only-site"
          label="Site"
          defaultValue={state.site ?? ''}
          emptyLabel="All"
          options={sites.map(({ id, name }) => ({ value: id, label: name }))}
        />
        <SelectField
          name="mode"
          id="only-mode"
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
          id="only-effect"
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
          id="only-outside"
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
          id="only-voided"
          label="Voided"
          defaultValue={state.voided ?? ''}
          emptyLabel="Those that count"
          options={[
            { value: 'yes', label: 'Voided ones' },
            { value: 'all', label: 'All' },
          ]}
        />
        <TextField type="date" name="from" id="only-from" label="From" defaultValue={state.from} />
        <TextField type="date" name="to" id="only-to" label="Up to" defaultValue={state.to} />
        <div>
          <Button tone="quiet">Show</Button>
        </div>
      </Form>
    </Disclosure>
  );
}
