import type { TariffFile } from '../../server/tariff/tariffFile.ts';
import { useEditing } from './context.ts';
import { ChoiceAt, NumberAt, type RowColumn, RowsAt, TextAt } from './fields.tsx';
import { valueAt } from './paths.ts';

const EVERY_DAY = 'every day';
const WORKDAYS = 'Monday to Friday';
const WEEKEND = 'Saturday and Sunday';
const ALWAYS = 'all year';

/** Days of the week as the form names them, and back. */
export const DAYS = {
  read: (value: unknown): string => {
    if (!Array.isArray(value)) return EVERY_DAY;
    const days = value.join(' ');
    if (days === 'mon tue wed thu fri') return WORKDAYS;
    return days === 'sat sun' ? WEEKEND : days;
  },
  write: (text: string): string[] | undefined => {
    if (text === EVERY_DAY) return undefined;
    if (text === WORKDAYS) return ['mon', 'tue', 'wed', 'thu', 'fri'];
    return text === WEEKEND ? ['sat', 'sun'] : text.split(/[\s,]+/);
  },
};

/** Every field of a tariff file that a person fills in; what the form does not show stays in the file as it is. */
export function TariffForm({ file }: { readonly file: TariffFile }) {
  const { set } = useEditing();
  const money = file.currency || 'money';
  const seasons = (file.seasons ?? []).map((season) => season.name).filter((name) => typeof name === 'string');
  const when: RowColumn[] = [
    { path: ['name'], head: 'Name', kind: 'text' },
    {
      path: ['season'],
      head: 'Season',
      kind: 'text',
      known: [ALWAYS, ...seasons],
      read: (value) => (typeof value === 'string' ? value : ALWAYS),
      write: (text) => (text === ALWAYS ? undefined : text),
    },
    { path: ['days'], head: 'Days', kind: 'text', known: [EVERY_DAY, WORKDAYS, WEEKEND], ...DAYS },
    { path: ['from'], head: 'From', kind: 'text' },
    { path: ['to'], head: 'To', kind: 'text' },
  ];
  const dates = valueAt(file, ['holidays', 'dates']);
  return (
    <>
      <fieldset>
        <legend>Tariff</legend>
        <TextAt path={['name']} label="Name" />
        <TextAt
          path={['currency']}
          label="Currency"
          known={['EUR', 'USD', 'GBP', 'CHF', 'CAD', 'AUD', 'NZD']}
          hint="three capitals"
        />
        <TextAt path={['timeZone']} label="Time zone" known={Intl.supportedValuesOf('timeZone')} />
      </fieldset>
      <fieldset>
        <legend>Energy</legend>
        <RowsAt
          path={['seasons']}
          caption="Seasons"
          columns={[
            { path: ['name'], head: 'Name', kind: 'text' },
            { path: ['from'], head: 'First day, MM-DD', kind: 'text' },
            { path: ['to'], head: 'Last day, MM-DD', kind: 'text' },
          ]}
          blank={(rows) => ({ name: `season ${rows.length + 1}`, from: '01-01', to: '12-31' })}
        />
        <RowsAt
          path={['energy']}
          caption="Prices of energy; of those that fit, the first holds"
          least={1}
          columns={[...when, { path: ['rate'], head: 'Price', unit: `${money}/kWh`, kind: 'number' }]}
          blank={(rows) => ({ name: `price ${rows.length + 1}`, rate: 0.2 })}
        />
      </fieldset>
      <fieldset>
        <legend>Demand</legend>
        <RowsAt
          path={['demand']}
          caption="Charges for the highest demand of a month"
          columns={[
            ...when,
            { path: ['rate'], head: 'Price', unit: `${money}/kW`, kind: 'number' },
            { path: ['ratchet', 'fraction'], head: 'Ratchet', unit: '%', kind: 'number', scale: 100 },
            { path: ['ratchet', 'months'], head: 'over months', kind: 'number' },
          ]}
          blank={(rows) => ({ name: `demand ${rows.length + 1}`, rate: 5 })}
        />
        <p class="field">
          <label for="demand-window">Metered over</label>
          <select
            id="demand-window"
            value={String(file.demandWindowMinutes ?? 30)}
            onChange={(event) => set(['demandWindowMinutes'], Number(event.currentTarget.value))}
          >
            <option value="15">15 min</option>
            <option value="30">30 min</option>
            <option value="60">60 min</option>
          </select>
        </p>
      </fieldset>
      <fieldset>
        <legend>Beside energy</legend>
        <NumberAt path={['fixedPerMonth']} label="Fixed charge" unit={`${money} a month`} />
        <NumberAt path={['taxPercent']} label="Tax" unit="%" />
        <NumberAt path={['carbonKgPerKwh']} label="Carbon" unit="kg CO₂/kWh" />
      </fieldset>
      <fieldset>
        <legend>Holidays</legend>
        <TextAt path={['holidays', 'country']} label="Country" hint="ISO code, such as IE" />
        <TextAt path={['holidays', 'region']} label="Region" />
        <ChoiceAt
          path={['holidays', 'as']}
          label="Priced as"
          otherwise="sun"
          options={['sun', 'sat', 'mon', 'tue', 'wed', 'thu', 'fri'].map((value) => ({ value, name: value }))}
        />
        {Array.isArray(dates) && <p class="aside">{dates.length} dates of its own are kept.</p>}
      </fieldset>
    </>
  );
}
