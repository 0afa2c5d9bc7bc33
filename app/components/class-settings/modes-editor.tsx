import { Form } from 'react-router';

import { Button } from '../button';
import { Disclosure } from '../disclosure';
import { TextField } from '../text-field';

interface ModesEditorProps {
  modes: readonly { id: string; name: string; failures: number }[];
  /** What was sent and refused: the mode it was about (null for a new one), the text, and why. */
  refused?: { modeId: string | null; text: string; errors: readonly string[] };
}

/** Failure modes of a class: a new one, or another name for one there is. */
export function ModesEditor({ modes, refused }: ModesEditorProps) {
  const refusedNew = refused?.modeId === null ? refused : undefined;
  return (
    <>
      {modes.length === 0 && <p className="mt-1">None yet. Technicians can only say “Something else”.</p>}
      <div className="border-hair mt-2 border-t">
        {modes.map((mode) => {
          const refusedHere = refused?.modeId === mode.id ? refused : undefined;
          return (
            <Disclosure
              key={`${mode.id} ${mode.name}`}
              open={refusedHere !== undefined}
              summary={
                <span>
                  {mode.name} <span className="text-grey text-[0.9rem]">{timesWords(mode.failures)}</span>
                </span>
              }
            >
              <Form method="post">
                <input type="hidden" name="modeId" value={mode.id} />
                <input type="hidden" name="seenName" value={mode.name} />
                <TextField
                  id={`mode-${mode.id}`}
                  name="modeName"
                  label="Another name for it"
                  hint="Its failures stay with it."
                  defaultValue={refusedHere?.text ?? mode.name}
                  errors={refusedHere?.errors}
                  maxLength={120}
                />
                <Button name="intent" value="rename-mode" tone="quiet">
                  Rename
                </Button>
              </Form>
            </Disclosure>
          );
        })}
      </div>
      <Form method="post" key={modes.length}>
        <TextField
          id="new-mode"
          name="modeName"
          label="Add a mode"
          hint="As a technician would say it: “Leaking at the face”."
          defaultValue={refusedNew?.text}
          errors={refusedNew?.errors}
          maxLength={120}
        />
        <Button name="intent" value="add-mode" tone="quiet">
          Add
        </Button>
      </Form>
    </>
  );
}

function timesWords(failures: number): string {
  if (failures === 0) return 'not seen yet';
  return failures === 1 ? '1 failure' : `${failures} failures`;
}
