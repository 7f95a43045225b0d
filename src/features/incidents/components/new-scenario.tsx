import { useState, type SubmitEvent } from 'react';
import { useNavigate } from 'react-router-dom';
import type { ScenarioSummary } from '../../../../shared/schemas/incidents';
import { Button } from '../../../components/button';
import { Dialog } from '../../../components/dialog';
import { Field } from '../../../components/field';
import { SelectInput, TextInput } from '../../../components/inputs';
import { Notice } from '../../../components/notice';
import { errorText } from '../../../lib/form-errors';
import { useCreateScenario } from '../api';

/** A new set of assumptions: empty, or a copy of another scenario of the incident to be varied. */
export function NewScenario({ incidentId, scenarios }: { incidentId: string; scenarios: readonly ScenarioSummary[] }) {
  const [isOpen, setIsOpen] = useState(false);
  return (
    <>
      <Button kind="primary" icon="add" onClick={() => setIsOpen(true)}>
        New scenario
      </Button>
      <Dialog isOpen={isOpen} onClose={() => setIsOpen(false)} title="New scenario">
        <NewScenarioForm incidentId={incidentId} scenarios={scenarios} onCancel={() => setIsOpen(false)} />
      </Dialog>
    </>
  );
}

function NewScenarioForm({ incidentId, scenarios, onCancel }: { incidentId: string; scenarios: readonly ScenarioSummary[]; onCancel: () => void }) {
  const create = useCreateScenario(incidentId);
  const navigate = useNavigate();
  const [name, setName] = useState(`Scenario ${scenarios.length + 1}`);
  const [copyOf, setCopyOf] = useState('');
  const isNameless = name.trim() === '';
  const submit = async (event: SubmitEvent) => {
    event.preventDefault();
    if (isNameless) return;
    const scenario = await create.mutateAsync({ name: name.trim(), copyOfScenarioId: copyOf || null }).catch(() => null);
    if (scenario) await navigate(`/scenarios/${scenario.id}`);
  };
  return (
    <form onSubmit={(event) => void submit(event)} className="flex flex-col gap-5" noValidate>
      {create.error && (
        <Notice tone="bad" title="The scenario was not made">
          {errorText(create.error)}
        </Notice>
      )}
      <Field label="Name" error={isNameless ? 'Give a name' : undefined}>
        <TextInput value={name} onChange={(event) => setName(event.target.value)} maxLength={120} data-autofocus />
      </Field>
      {scenarios.length > 0 && (
        <Field label="Begin with">
          <SelectInput value={copyOf} onChange={(event) => setCopyOf(event.target.value)}>
            <option value="">an empty chart</option>
            {scenarios.map((scenario) => (
              <option key={scenario.id} value={scenario.id}>
                a copy of {scenario.name}
              </option>
            ))}
          </SelectInput>
        </Field>
      )}
      <div className="flex flex-wrap gap-3">
        <Button type="submit" kind="primary" isBusy={create.isPending}>
          Make scenario
        </Button>
        <Button kind="quiet" onClick={onCancel}>
          Cancel
        </Button>
      </div>
    </form>
  );
}
