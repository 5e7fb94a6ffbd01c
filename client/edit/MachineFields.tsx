import type { CurveEntry, StationFile } from '../../server/station/stationFile.ts';
import { shownFlowUnit } from '../format.ts';
import type { Path } from '../station.ts';
import { useEditing } from './context.ts';
import { NumberAt, RowsAt } from './fields.tsx';
import { valueAt } from './paths.ts';
import { type CurveKind, curveAs, kindOf } from './reshape.ts';

interface MachineFieldsProps {
  readonly path: Path;
  readonly file: StationFile;
}

/** Curve, motor and drive of one pump, or of one in a train. */
export function MachineFields({ path, file }: MachineFieldsProps) {
  const { set } = useEditing();
  const { head, power } = file.units;
  const flow = shownFlowUnit(file.units.flow);
  const curve = valueAt(file, [...path, 'curve']) as CurveEntry;
  const kind = kindOf(curve);
  const drive = valueAt(file, [...path, 'drive']);
  const has = typeof drive === 'object' && drive !== null;
  const id = `${path.join('-')}-curve`;
  return (
    <>
      <NumberAt path={[...path, 'inSeries']} label="In series" hint="1 if empty" />
      <div class="break" />
      <p class="field text">
        <label for={id}>Curve known by</label>
        <select
          id={id}
          value={kind}
          onChange={(event) => set([...path, 'curve'], curveAs(curve, event.currentTarget.value as CurveKind))}
        >
          <option value="point">shutoff head and one point</option>
          <option value="shape">shutoff head and shape</option>
          <option value="points">a table of points</option>
        </select>
      </p>
      {kind !== 'points' && (
        <>
          <NumberAt path={[...path, 'curve', 'shutoffHead']} label="Head at no flow" unit={head} />
          {kind === 'point' ? (
            <>
              <NumberAt path={[...path, 'curve', 'operatingPoint', 'flow']} label="Point: flow" unit={flow} />
              <NumberAt path={[...path, 'curve', 'operatingPoint', 'head']} label="Point: head" unit={head} />
            </>
          ) : (
            <NumberAt path={[...path, 'curve', 'shape']} label="Falls by" unit={`${head} at 1 ${flow}`} />
          )}
          <NumberAt path={[...path, 'curve', 'bestFlow']} label="Best-efficiency flow" unit={flow} />
          <NumberAt path={[...path, 'curve', 'bestEfficiency']} label="Best efficiency" unit="%" scale={100} />
          <NumberAt
            path={[...path, 'curve', 'maxFlow']}
            label="Curve ends at"
            unit={flow}
            hint="where it must, if empty"
          />
        </>
      )}
      {kind === 'points' && (
        <RowsAt
          path={[...path, 'curve', 'points']}
          caption="Points of the curve"
          least={4}
          columns={[
            { path: ['flow'], head: 'Flow', unit: flow, kind: 'number' },
            { path: ['head'], head: 'Head', unit: head, kind: 'number' },
            { path: ['efficiency'], head: 'Efficiency', unit: '%', kind: 'number', scale: 100 },
            { path: ['power'], head: 'or shaft power', unit: power, kind: 'number' },
          ]}
          blank={(rows) => rows.at(-1)}
        />
      )}
      <div class="break" />
      <NumberAt path={[...path, 'motor', 'ratedPower']} label="Motor rating" unit={power} />
      <NumberAt path={[...path, 'motor', 'serviceFactor']} label="Service factor" hint="1 if empty" />
      <EfficiencyFields path={[...path, 'motor', 'efficiency']} label="Motor efficiency" />
      <div class="break" />
      <p class="field">
        <label for={`${id}-drive`}>Drive</label>
        <select
          id={`${id}-drive`}
          value={!has ? 'none' : (drive as { fitted?: boolean }).fitted === false ? 'proposed' : 'fitted'}
          onChange={(event) => {
            const next = event.currentTarget.value;
            set(
              [...path, 'drive'],
              next === 'none'
                ? undefined
                : { minSpeed: 0.5, maxSpeed: 1, efficiency: 0.97, ...(has && drive), fitted: next === 'fitted' },
            );
          }}
        >
          <option value="none">none</option>
          <option value="proposed">proposed</option>
          <option value="fitted">fitted</option>
        </select>
      </p>
      {has && (
        <>
          <NumberAt path={[...path, 'drive', 'minSpeed']} label="Least speed" unit="% of rated" scale={100} />
          <NumberAt path={[...path, 'drive', 'maxSpeed']} label="Highest speed" unit="% of rated" scale={100} />
          <EfficiencyFields path={[...path, 'drive', 'efficiency']} label="Drive efficiency" />
        </>
      )}
    </>
  );
}

/** An efficiency is a number, a table over load, or the name of a published table. */
function EfficiencyFields({ path, label }: { readonly path: Path; readonly label: string }) {
  const { file, set } = useEditing();
  const value = valueAt(file, path);
  if (typeof value === 'string') {
    return (
      <p class="field text">
        <span class="label">{label}</span>
        <span>
          {value}{' '}
          <button type="button" class="quiet" onClick={() => set(path, 0.92)}>
            Give a number instead
          </button>
        </span>
      </p>
    );
  }
  if (Array.isArray(value)) {
    return (
      <RowsAt
        path={path}
        caption={label}
        least={1}
        columns={[
          { path: ['load'], head: 'Load', unit: '%', kind: 'number', scale: 100 },
          { path: ['efficiency'], head: 'Efficiency', unit: '%', kind: 'number', scale: 100 },
        ]}
        blank={(rows) => rows.at(-1)}
      />
    );
  }
  return (
    <>
      <NumberAt path={path} label={label} unit="%" scale={100} />
      <button
        type="button"
        class="quiet"
        aria-label={`Give ${label.toLowerCase()} over load`}
        onClick={() => {
          const at = typeof value === 'number' ? value : 0.92;
          set(path, [
            { load: 0.25, efficiency: at },
            { load: 0.5, efficiency: at },
            { load: 0.75, efficiency: at },
            { load: 1, efficiency: at },
          ]);
        }}
      >
        over load
      </button>
    </>
  );
}
