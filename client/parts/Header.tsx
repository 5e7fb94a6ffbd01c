import { UNIT_CHOICES, type UnitChoice } from '../format.ts';

interface HeaderProps {
  readonly units: UnitChoice;
  readonly onUnits: (units: UnitChoice) => void;
  readonly digits: 'three' | 'all';
  readonly onDigits: (digits: 'three' | 'all') => void;
}

const UNIT_NAMES: Record<UnitChoice, string> = { file: "the station's", metric: 'metric', us: 'US' };

/** The name of the program, and how numbers are written. */
export function Header({ units, onUnits, digits, onDigits }: HeaderProps) {
  return (
    <header>
      <p class="program">
        <strong>Nth Pump</strong> <span class="aside">which pump, when, and what is it worth</span>
      </p>
      <p class="settings no-print">
        <label>
          <span class="label">Units</span>
          <select value={units} onChange={(event) => onUnits(event.currentTarget.value as UnitChoice)}>
            {UNIT_CHOICES.map((choice) => (
              <option key={choice} value={choice}>
                {UNIT_NAMES[choice]}
              </option>
            ))}
          </select>
        </label>
        <label>
          <span class="label">Figures</span>
          <select value={digits} onChange={(event) => onDigits(event.currentTarget.value as 'three' | 'all')}>
            <option value="three">three</option>
            <option value="all">all</option>
          </select>
        </label>
        <button type="button" onClick={() => print()}>
          Print
        </button>
      </p>
    </header>
  );
}
