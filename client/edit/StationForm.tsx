import type { PumpEntry, StationFile } from '../../server/station/stationFile.ts';
import { FLOW_UNITS, HEAD_UNITS, isUsFlow, POWER_UNITS } from '../../server/units.ts';
import { shownFlowUnit } from '../format.ts';
import { dutyNames, type Path } from '../station.ts';
import { Confirm } from './Confirm.tsx';
import { useEditing } from './context.ts';
import { Cell, ChoiceAt, NumberAt, RowsAt, TextAt } from './fields.tsx';
import { MachineFields } from './MachineFields.tsx';
import { valueAt } from './paths.ts';
import { asTrain, firstSteps, frictionAs, type TrainEntry, withoutPart, withPart } from './reshape.ts';

const names = <T extends string>(values: readonly T[], called: Partial<Record<T, string>> = {}) =>
  values.map((value) => ({ value, name: called[value] ?? value }));

/** Every field of a station file that a person fills in; what the form does not show stays in the file as it is. */
export function StationForm({ file }: { readonly file: StationFile }) {
  const { flow, head, power } = file.units;
  const volume = isUsFlow(flow) ? 'gal' : 'm³';
  return (
    <>
      <fieldset>
        <legend>Station</legend>
        <TextAt path={['name']} label="Name" />
        <TextAt path={['timeZone']} label="Time zone" known={Intl.supportedValuesOf('timeZone')} />
        <TextAt
          path={['currency']}
          label="Currency"
          known={['EUR', 'USD', 'GBP', 'CHF', 'CAD', 'AUD', 'NZD']}
          hint="three capitals"
        />
        <ChoiceAt
          path={['units', 'flow']}
          label="Unit of flow"
          options={names(Object.keys(FLOW_UNITS) as (typeof flow)[], { 'm3/s': 'm³/s', 'm3/h': 'm³/h' })}
          hint="numbers stay as typed"
        />
        <ChoiceAt
          path={['units', 'head']}
          label="Unit of head"
          options={names(Object.keys(HEAD_UNITS) as (typeof head)[])}
        />
        <ChoiceAt
          path={['units', 'power']}
          label="Unit of power"
          options={names(Object.keys(POWER_UNITS) as (typeof power)[])}
        />
        <ChoiceAt
          path={['surplus']}
          label="Surplus goes"
          options={names(['storage', 'throttle'], { storage: 'into storage, pumps rest', throttle: 'into a valve' })}
        />
        <NumberAt path={['standbyPower']} label="Standby power" unit={power} hint="drawn at all times" />
        <NumberAt
          path={['liquid', 'temperature']}
          label="Liquid temperature"
          unit="°C"
          hint="water at 15 °C if empty"
        />
        <NumberAt path={['liquid', 'density']} label="Liquid density" unit="kg/m³" />
      </fieldset>
      <fieldset>
        <legend>What the pumps push against</legend>
        <NumberAt path={['system', 'staticHead']} label="Static head" unit={head} />
        <FrictionFields file={file} />
        <NumberAt path={['system', 'dischargeLevel']} label="Discharge level" unit={head} hint="over the datum" />
        <NumberAt path={['system', 'suctionLevel']} label="Suction level" unit={head} hint="over the datum" />
      </fieldset>
      <fieldset>
        <legend>Storage</legend>
        <NumberAt
          path={['storage', 'activeVolume']}
          label="Active volume"
          unit={volume}
          hint="between start and stop"
        />
        <NumberAt path={['storage', 'area']} label="Area" unit={`${head}²`} />
        <RowsAt
          path={['storage', 'levels']}
          caption="Levels, in the order pumps come on"
          most={20}
          columns={[
            { path: ['start'], head: 'Start', unit: head, kind: 'number' },
            { path: ['stop'], head: 'Stop', unit: head, kind: 'number' },
          ]}
          blank={() => ({ start: 0, stop: 0 })}
        />
      </fieldset>
      {file.pumps.map((_, i) => (
        <PumpFields key={i} file={file} at={i} />
      ))}
      <AddPump file={file} />
      <StepFields file={file} />
      <fieldset>
        <legend>Where pumps may run, as shares of best-efficiency flow</legend>
        <NumberAt path={['allowable', 'from']} label="Allowed from" unit="%" scale={100} hint="the maker's range" />
        <NumberAt path={['allowable', 'to']} label="Allowed to" unit="%" scale={100} />
        <NumberAt
          path={['preferred', 'from']}
          label="Preferred from"
          unit="%"
          scale={100}
          hint="70 to 120 % if empty"
        />
        <NumberAt path={['preferred', 'to']} label="Preferred to" unit="%" scale={100} />
        <NumberAt path={['rules', 'steady', 'minRunMinutes']} label="Least run, rule steady" unit="min" />
        <NumberAt path={['rules', 'steady', 'startPenaltyKwh']} label="A start counts for" unit="kWh" />
      </fieldset>
    </>
  );
}

function FrictionFields({ file }: { readonly file: StationFile }) {
  const { set } = useEditing();
  const { head } = file.units;
  const flow = shownFlowUnit(file.units.flow);
  const friction = file.system.friction ?? {};
  const kind = 'pipes' in friction ? 'pipes' : 'points' in friction ? 'points' : 'coefficient';
  const small = head === 'ft' ? 'in' : 'mm';
  const change = (next: string) => {
    if (next === kind) return;
    set(['system', 'friction'], frictionAs(file, next));
  };
  return (
    <>
      <p class="field">
        <label for="friction-kind">Friction known by</label>
        <select id="friction-kind" value={kind} onChange={(event) => change(event.currentTarget.value)}>
          <option value="coefficient">a coefficient</option>
          <option value="points">points of flow and total head</option>
          <option value="pipes">its pipes</option>
        </select>
      </p>
      {kind === 'coefficient' && (
        <NumberAt path={['system', 'friction', 'coefficient']} label="Coefficient" unit={`${head} at 1 ${flow}`} />
      )}
      {kind !== 'pipes' && <NumberAt path={['system', 'friction', 'exponent']} label="Exponent" hint="2 if empty" />}
      {kind === 'points' && (
        <RowsAt
          path={['system', 'friction', 'points']}
          caption="Known points of the system"
          least={1}
          columns={[
            { path: ['flow'], head: 'Flow', unit: flow, kind: 'number' },
            { path: ['head'], head: 'Total head', unit: head, kind: 'number' },
          ]}
          blank={(rows) => rows.at(-1) ?? { flow: 1, head: file.system.staticHead }}
        />
      )}
      {kind === 'pipes' && (
        <RowsAt
          path={['system', 'friction', 'pipes']}
          caption="Pipes that all pumps share"
          least={1}
          columns={[
            { path: ['name'], head: 'Name', kind: 'text' },
            { path: ['length'], head: 'Length', unit: head, kind: 'number' },
            { path: ['diameter'], head: 'Diameter', unit: small, kind: 'number' },
            { path: ['roughness'], head: 'Roughness', unit: small, kind: 'number' },
            { path: ['minorLoss'], head: 'Minor loss K', kind: 'number' },
          ]}
          blank={(rows) =>
            rows.at(-1) ?? { length: 100, diameter: head === 'ft' ? 12 : 300, roughness: head === 'ft' ? 0.006 : 0.15 }
          }
        />
      )}
    </>
  );
}

function PumpFields({ file, at }: { readonly file: StationFile; readonly at: number }) {
  const { set } = useEditing();
  const entry = file.pumps[at]!;
  const path: Path = ['pumps', at];
  const { head } = file.units;
  const flow = shownFlowUnit(file.units.flow);
  return (
    <fieldset class="pump">
      <legend>
        Pump {at + 1}: {entry.name}{' '}
        <button
          type="button"
          class="quiet"
          onClick={() => set(['pumps'], [...file.pumps, { ...entry, name: `${entry.name} copy` }])}
        >
          Copy
        </button>{' '}
        {file.pumps.length > 1 && (
          <Confirm
            ask="Remove"
            says={`${entry.name} and its curve would be gone.`}
            does="Remove it"
            onDo={() => set(path, undefined)}
          />
        )}
      </legend>
      <TextAt path={[...path, 'name']} label="Name" />
      <NumberAt path={[...path, 'count']} label="How many of it" hint="1 if empty" />
      <ChoiceAt path={[...path, 'role']} label="Role" options={names(['duty', 'standby'])} />
      <NumberAt path={[...path, 'ratedSpeed']} label="Rated speed" unit="rpm" />
      <NumberAt
        path={[...path, 'branchLoss']}
        label="Branch loss"
        unit={`${head} at 1 ${flow}`}
        hint="own pipe and valves"
      />
      {'train' in entry ? (
        <TrainFields file={file} path={path} entry={entry} onChange={(next) => set(path, next)} />
      ) : (
        <>
          <MachineFields path={path} file={file} />
          <p>
            <button type="button" class="quiet" onClick={() => set(path, asTrain(entry))}>
              Another kind of pump in series with it
            </button>
          </p>
        </>
      )}
    </fieldset>
  );
}

interface TrainFieldsProps {
  readonly file: StationFile;
  readonly path: Path;
  readonly entry: TrainEntry;
  readonly onChange: (entry: PumpEntry) => void;
}

/** Pumps in series, one after the other; the last that is left is a pump by itself again. */
function TrainFields({ file, path, entry, onChange }: TrainFieldsProps) {
  return (
    <>
      {entry.train.map((part, i) => (
        <fieldset key={i} class="pump">
          <legend>
            {entry.name}, in series {part.name ?? i + 1}{' '}
            <Confirm
              ask="Take out of the series"
              says={`The curve of ${part.name ?? `number ${i + 1}`} would be gone.`}
              does="Take it out"
              onDo={() => onChange(withoutPart(entry, i))}
            />
          </legend>
          <TextAt path={[...path, 'train', i, 'name']} label="Name" />
          <MachineFields path={[...path, 'train', i]} file={file} />
        </fieldset>
      ))}
      <p>
        <button type="button" class="quiet" onClick={() => onChange(withPart(entry))}>
          One more in series
        </button>
      </p>
    </>
  );
}

function AddPump({ file }: { readonly file: StationFile }) {
  const { set } = useEditing();
  const next = () => {
    const { count: _count, ...like } = file.pumps.at(-1)!;
    set(['pumps'], [...file.pumps, { ...like, name: `P${file.pumps.length + 1}` }]);
  };
  return (
    <p>
      <button type="button" onClick={next}>
        Add a pump
      </button>
    </p>
  );
}

/** The operator's own table: at which flow each further pump comes on, and at which it goes off again. */
function StepFields({ file }: { readonly file: StationFile }) {
  const { set, faults } = useEditing();
  const flow = shownFlowUnit(file.units.flow);
  // An order that is found from the curves names no pump before it is worked out: its steps are then counted.
  const names = file.order === 'least-power' ? [] : (file.order ?? dutyNames(file));
  const steps = Math.max(0, dutyNames(file).length - 1);
  // Entries of a file are for pumps that differ: a step is then called by the pump that it brings on.
  const alike = file.pumps.filter(({ role }) => role !== 'standby').length < 2;
  const pumpOf = (i: number) => (alike ? i + 2 : (names[i + 1] ?? i + 2));
  const path: Path = ['rules', 'flow-steps'];
  const has = valueAt(file, path) !== undefined;
  const said = [...faults].filter(([at]) => at.startsWith('rules.flow-steps'));
  if (steps === 0 && !has) return null;
  return (
    <fieldset>
      <legend>How it is run today</legend>
      <label class="check">
        <input type="checkbox" checked={has} onChange={() => set(path, has ? undefined : firstSteps(file, steps))} /> by
        steps of its own
      </label>
      {has && (
        <div class="rows">
          <table>
            <caption>Steps of flow</caption>
            <thead>
              <tr>
                <th scope="col">Pump</th>
                <th scope="col">
                  On at<span class="unit">{flow}</span>
                </th>
                <th scope="col">
                  Off at<span class="unit">{flow}</span>
                </th>
              </tr>
            </thead>
            <tbody>
              {Array.from({ length: steps }, (_, i) => (
                <tr key={i}>
                  <th scope="row">{pumpOf(i)}</th>
                  {(['bringOn', 'dropOff'] as const).map((side) => (
                    <td key={side} class="slot">
                      <Cell
                        path={[...path, side, i]}
                        column={{ head: side, kind: 'number' }}
                        label={`${alike ? 'Pump ' : ''}${pumpOf(i)} ${side === 'bringOn' ? 'on' : 'off'} at`}
                      />
                    </td>
                  ))}
                </tr>
              ))}
            </tbody>
          </table>
          {said.map(([at, line]) => (
            <p key={at} class="fault">
              {line}
            </p>
          ))}
          {((valueAt(file, [...path, 'bringOn']) as unknown[] | undefined)?.length ?? 0) !== steps && (
            <button type="button" class="quiet" onClick={() => set(path, firstSteps(file, steps))}>
              Begin the table anew for {steps + 1} pumps
            </button>
          )}
        </div>
      )}
    </fieldset>
  );
}
