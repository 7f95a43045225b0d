import { formatEntered, formatNumber } from '../../../../shared/format';
import type { Reach } from '../../../../shared/schemas/estimate';
import { Button } from '../../../components/button';
import { Section } from '../../../components/page';
import { emptyFlow } from '../model/empty-entry';
import { isDrawable, lengthsOf } from '../model/place';
import { readCentreline, writeCentreline } from '../model/text-rows';
import { CheckField, FieldGrid, LongTextField, NumberField, SelectField, TextField, useValue } from './bound-fields';
import { useIsWriting } from './entry-mode';
import { RowsEditor } from './rows-editor';
import { RowsTextField } from './rows-text-field';

type Line = [number, number, number][];
const banks = [
  { value: 'left', label: 'Left bank, looking downstream' },
  { value: 'right', label: 'Right bank, looking downstream' },
];

/** Width x depth x velocity beside the discharge: figures that disagree were taken from different places. */
function sectionFlow(row: Record<string, unknown>) {
  const [q, w, h, u] = ['dischargeM3s', 'widthM', 'depthM', 'velocityMps'].map((key) => row[key]);
  if ([q, w, h, u].some((value) => typeof value !== 'number' || !(value > 0))) return '';
  const flow = (w as number) * (h as number) * (u as number);
  const off = Math.abs(flow / (q as number) - 1);
  return `${formatNumber(flow, 3)} m³/s${off > 0.1 ? `, ${Math.round(off * 100)} % off: check` : ''}`;
}

function lineSummary(line: Line) {
  if (!isDrawable(line)) return 'not drawn';
  const { drawnKm, chainageKm } = lengthsOf(line);
  return `${line.length} positions, km ${formatEntered(line[0]![2])} down to km ${formatEntered(line.at(-1)![2])}; drawn length ${formatNumber(drawnKm, 3)} km, by chainage ${formatNumber(chainageKm, 3)} km`;
}

export function ReachFields({ name, others, onRemove }: { name: string; others: readonly Reach[]; onRemove: (() => void) | undefined }) {
  const isWriting = useIsWriting();
  const title = useValue<string>(`${name}.name`);
  const line = useValue<Line>(`${name}.centreline`);
  return (
    <Section title={title || 'Unnamed reach'} actions={isWriting && onRemove && <Button kind="quiet" icon="close" onClick={onRemove}>Remove this reach</Button>}>
      <FieldGrid>
        {isWriting && <TextField name={`${name}.name`} label="Name of the reach" />}
        {isWriting && <TextField name={`${name}.id`} label="Id" hint="Entries and estimates refer to it: letters, figures, hyphens" />}
        {isWriting && <TextField name={`${name}.chainagePrefix`} label="Letters before its chainage" hint="For example OL; km where it has none" />}
        <SelectField name={`${name}.downstreamReachId`} label="Flows into" emptyLabel="Out of the network" choices={others.map((reach) => ({ value: reach.id, label: reach.name || reach.id }))} />
        <SelectField name={`${name}.joinsOnBank`} label="Joins on" emptyLabel="Is the main stem itself" choices={banks} />
        <NumberField name={`${name}.slope`} label="Slope" unit="m/m" range="Above 0, at most 0.5." isOptional />
        <NumberField name={`${name}.manningN`} label="Manning n" unit="s/m^(1/3)" range="Above 0, at most 1." isOptional />
        <NumberField name={`${name}.dispersionM2s`} label="Dispersion along" unit="m²/s" hint="Empty: after Fischer 1979 from the figures below." isOptional emptyWords="by Fischer 1979" />
        <NumberField name={`${name}.transverseM2s`} label="Mixing across" unit="m²/s" hint="Empty: 0.6 × depth × shear velocity (Fischer et al. 1979)." isOptional emptyWords="by 0.6 × depth × shear velocity" />
        <CheckField name={`${name}.calibrated`} label="Calibrated by a dye test or records" readWords={['yes', 'no']} />
        <CheckField name={`${name}.tidal`} label="Tidal" readWords={['yes', 'no']} />
        <LongTextField name={`${name}.coefficientNote`} label="Where the coefficients come from" isOptional />
      </FieldGrid>
      <div className="pt-4">
        <RowsEditor
          name={`${name}.hydraulics`} caption={`Hydraulics of ${title}`} rowWord="flow" addLabel="Add flow" most={30}
          empty="No figures yet."
          newRow={() => emptyFlow('')}
          trail={sectionFlow} trailLabel="Width × depth × velocity"
          columns={[
            { key: 'flowName', label: 'Flow', kind: 'text', width: 'min-w-24' },
            { key: 'exceededPercent', label: 'Exceeded', unit: '% of the time', kind: 'number', width: 'min-w-24' },
            { key: 'dischargeM3s', label: 'Discharge', unit: 'm³/s', kind: 'number', width: 'min-w-24' },
            { key: 'widthM', label: 'Width', unit: 'm', kind: 'number', width: 'min-w-24' },
            { key: 'depthM', label: 'Depth', unit: 'm', kind: 'number', width: 'min-w-24' },
            { key: 'velocityMps', label: 'Velocity', unit: 'm/s', kind: 'number', width: 'min-w-24' },
          ]}
        />
      </div>
      <div className="pt-4">
        <ReadOrWriteLine name={`${name}.centreline`} hint={`One "longitude, latitude, km" a line, downstream: the km falls. Now ${lineSummary(line)}.`} />
      </div>
    </Section>
  );
}

function ReadOrWriteLine({ name, hint }: { name: string; hint: string }) {
  const field = <RowsTextField<Line> name={name} label="Centreline" hint={hint} read={readCentreline} write={writeCentreline} summary={lineSummary} />;
  return useIsWriting() ? field : <dl>{field}</dl>;
}
