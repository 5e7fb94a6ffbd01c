import { RULE_IDS, type RuleId } from '../../../server/staging/result.ts';
import { usePage } from '../../context.ts';
import { saveFile } from '../../files.ts';
import { ChoiceField, NumberField, TextField } from '../../parts/Field.tsx';
import { RULE_TEXT } from '../../rules.ts';
import { type CaseDraft, caseFileOf, isPlaceholder } from './caseTerms.ts';
import type { CaseWork } from './useCase.ts';

interface CaseFormProps {
  readonly work: CaseWork;
  /** Rules that were run on the station. */
  readonly rules: readonly RuleId[];
}

type Option = NonNullable<CaseDraft['options']>[number];

/** The terms of a case; everything below moves as they are typed. */
export function CaseForm({ work, rules }: CaseFormProps) {
  const { format } = usePage();
  const { draft, write, faults, start } = work;
  const money = format.money.unit;
  const set = (fields: Partial<CaseDraft>) => write({ ...draft, ...fields });
  const options = draft.options ?? [];
  const setOption = (i: number, fields: Partial<Option>) =>
    set({ options: options.map((each, k) => (k === i ? { ...each, ...fields } : each)) });
  const known = [...new Set([...rules, draft.baseline, draft.proposed, ...options.map((each) => each.rule)])]
    .filter((id): id is RuleId => (RULE_IDS as readonly string[]).includes(id))
    .map((value) => ({ value, name: RULE_TEXT[value].name }));
  const file = caseFileOf(draft);
  return (
    <form class="case-form no-print" aria-label="Terms of the case" onSubmit={(event) => event.preventDefault()}>
      <fieldset>
        <legend>Terms</legend>
        <ChoiceField
          label="Runs today by"
          value={draft.baseline as RuleId}
          options={known}
          onChange={(baseline) => set({ baseline })}
          fault={faults.get('baseline')}
        />
        <NumberField
          label="Life"
          unit="years"
          value={draft.years}
          step={1}
          onChange={(years) => set({ years })}
          fault={faults.get('years')}
        />
        <NumberField
          label="Discount rate"
          unit="% a year"
          scale={100}
          value={draft.discountRate}
          onChange={(discountRate) => set({ discountRate })}
          fault={faults.get('discountRate')}
        />
        <NumberField
          label="Energy prices rise"
          unit="% a year"
          scale={100}
          value={draft.energyEscalation ?? 0}
          onChange={(rate) => set({ energyEscalation: rate ?? 0 })}
          fault={faults.get('energyEscalation')}
          hint={draft.rates === 'nominal' ? 'nominal, as the discount rate' : 'above inflation, as the discount rate'}
        />
      </fieldset>
      <OptionFields
        legend="Proposed"
        money={money}
        rules={known}
        at=""
        faults={faults}
        value={{ ...draft, name: draft.name ?? '', rule: draft.proposed, capital: draft.capital ?? undefined }}
        placeholder={isPlaceholder(draft, start) ? 'placeholder' : undefined}
        onChange={({ rule, capital, ...rest }) =>
          set({ ...rest, ...(rule !== undefined && { proposed: rule }), ...(capital !== undefined && { capital }) })
        }
        onPriceGone={() => set({ capital: null })}
      />
      {options.map((option, i) => (
        <OptionFields
          key={i}
          legend={`Also ${i + 1}`}
          money={money}
          rules={known}
          at={`options[${i}].`}
          faults={faults}
          value={option}
          onChange={(fields) => setOption(i, fields)}
          onPriceGone={() => setOption(i, { capital: 0 })}
          onRemove={() => set({ options: options.filter((_, k) => k !== i) })}
        />
      ))}
      {start.placeholder && <p class="aside">{start.placeholder}</p>}
      <p class="tools">
        <button
          type="button"
          onClick={() =>
            set({ options: [...options, { name: `option ${options.length + 1}`, rule: draft.proposed, capital: 0 }] })
          }
        >
          Add an option
        </button>
        <button type="button" disabled={file === null} onClick={() => file && saveFile('case.json', file)}>
          Save the case file
        </button>
        <button type="button" class="quiet" onClick={work.reset}>
          Back to the first terms
        </button>
      </p>
      {work.lines.length > 0 && (
        <ul class="faults" role="alert">
          {work.lines.map((line) => (
            <li key={line}>{line}</li>
          ))}
        </ul>
      )}
    </form>
  );
}

interface OptionFieldsProps {
  readonly legend: string;
  readonly money: string;
  readonly rules: readonly { readonly value: RuleId; readonly name: string }[];
  /** Path of the option in the file, for its faults. */
  readonly at: string;
  readonly faults: CaseWork['faults'];
  readonly value: Partial<Option> & { readonly name: string; readonly rule: string };
  readonly placeholder?: string | undefined;
  readonly onChange: (fields: Partial<Option>) => void;
  readonly onPriceGone: () => void;
  readonly onRemove?: () => void;
}

function OptionFields({
  legend,
  money,
  rules,
  at,
  faults,
  value,
  placeholder,
  onChange,
  onPriceGone,
  onRemove,
}: OptionFieldsProps) {
  const fault = (field: string) => faults.get(`${at}${field}`);
  return (
    <fieldset>
      <legend>
        {legend}: {value.name || 'no name'}{' '}
        {onRemove && (
          <button type="button" class="quiet" aria-label={`Remove ${value.name}`} onClick={onRemove}>
            Remove
          </button>
        )}
      </legend>
      <TextField label="Name" value={value.name} onChange={(name) => onChange({ name })} fault={fault('name')} />
      <ChoiceField
        label="Runs by"
        value={value.rule as RuleId}
        options={rules}
        onChange={(rule) => onChange({ rule })}
        fault={fault(at === '' ? 'proposed' : 'rule')}
      />
      <NumberField
        label="Capital"
        unit={money}
        value={value.capital}
        onChange={(capital) => (capital === null ? onPriceGone() : onChange({ capital }))}
        fault={fault('capital')}
        hint={placeholder}
      />
      <NumberField
        label="Incentive"
        unit={money}
        value={value.incentive ?? 0}
        onChange={(incentive) => onChange({ incentive: incentive ?? 0 })}
        fault={fault('incentive')}
      />
      <NumberField
        label="Maintenance saved"
        unit={`${money} a year`}
        value={value.maintenanceSavingPerYear ?? 0}
        onChange={(saving) => onChange({ maintenanceSavingPerYear: saving ?? 0 })}
        fault={fault('maintenanceSavingPerYear')}
      />
      <NumberField
        label="Worth at the end"
        unit={money}
        value={value.residualValue ?? 0}
        onChange={(residual) => onChange({ residualValue: residual ?? 0 })}
        fault={fault('residualValue')}
      />
    </fieldset>
  );
}
