import { useQueryClient } from '@tanstack/react-query';
import { useRef, useState, type SubmitEvent } from 'react';
import { useNavigate } from 'react-router-dom';
import { formatDay, formatTimeOfDay } from '../../../../shared/format';
import type { Incident, Marking } from '../../../../shared/schemas/incidents';
import { Button, type ButtonKind } from '../../../components/button';
import { Dialog } from '../../../components/dialog';
import { Field } from '../../../components/field';
import { ChoiceInput, TextInput } from '../../../components/inputs';
import { Notice } from '../../../components/notice';
import { errorText } from '../../../lib/form-errors';
import { serverNowMs } from '../../../lib/server-clock';
import { useDefaultOffset } from '../../../lib/session';
import { createIncident, createScenario } from '../api';
import { markingChoices } from '../marking-choices';

/** The shortest road from a call to a forecast: one press, a name and a marking already filled in, one more press. */
export function StartForecast({ kind = 'primary' }: { kind?: ButtonKind }) {
  const [isOpen, setIsOpen] = useState(false);
  return (
    <>
      <Button kind={kind} icon="add" onClick={() => setIsOpen(true)}>
        Start a forecast
      </Button>
      <Dialog isOpen={isOpen} onClose={() => setIsOpen(false)} title="Start a forecast" says="Opens an incident with one scenario and goes to its chart. Name and details can be changed later; the marking cannot.">
        <StartForecastForm onCancel={() => setIsOpen(false)} />
      </Dialog>
    </>
  );
}

function StartForecastForm({ onCancel }: { onCancel: () => void }) {
  const offset = useDefaultOffset();
  const [name, setName] = useState(() => `Forecast ${formatDay(serverNowMs(), offset).slice(4)} ${formatTimeOfDay(serverNowMs(), offset)}`);
  const [marking, setMarking] = useState<Marking>('PLANNING');
  const { start, isBusy, error } = useStart();
  const isNameless = name.trim() === '';
  const handleSubmit = (event: SubmitEvent) => {
    event.preventDefault();
    if (!isNameless) void start({ name: name.trim(), marking, utcOffset: offset });
  };
  return (
    <form onSubmit={handleSubmit} className="flex flex-col gap-5" noValidate>
      {error !== null && (
        <Notice tone="bad" title="The forecast was not started">
          {errorText(error)}
        </Notice>
      )}
      <Field label="Name of the incident" error={isNameless ? 'Give a name' : undefined}>
        <TextInput value={name} onChange={(event) => setName(event.target.value)} maxLength={120} data-autofocus />
      </Field>
      <Field label="Marking" hint="Stands on every page and mail of this incident, for good." isGroup>
        <ChoiceInput label="Marking" name="marking" value={marking} onChange={setMarking} choices={markingChoices} />
      </Field>
      <div className="flex flex-wrap gap-3">
        <Button type="submit" kind="primary" isBusy={isBusy}>
          Start forecast
        </Button>
        <Button kind="quiet" onClick={onCancel}>
          Cancel
        </Button>
      </div>
    </form>
  );
}

/** Makes the incident, then its scenario. When the second step fails, trying again does not make a second incident. */
function useStart() {
  const navigate = useNavigate();
  const client = useQueryClient();
  const made = useRef<Incident | null>(null);
  const [isBusy, setIsBusy] = useState(false);
  const [error, setError] = useState<unknown>(null);
  const start = async (wanted: { name: string; marking: Marking; utcOffset: string }) => {
    setIsBusy(true);
    setError(null);
    try {
      made.current ??= await createIncident({ ...wanted, summary: '' });
      const scenario = await createScenario(made.current.id, { name: 'Scenario 1' });
      void client.invalidateQueries({ queryKey: ['incidents'] });
      void client.invalidateQueries({ queryKey: ['watch'] });
      await navigate(`/scenarios/${scenario.id}`);
    } catch (failure) {
      setError(failure);
      setIsBusy(false);
    }
  };
  return { start, isBusy, error };
}
