import type { RuleResult } from '../../../server/staging/result.ts';
import { asRun } from '../../answers.ts';
import { usePage } from '../../context.ts';
import { type Format, sentence } from '../../format.ts';
import { Exhibit } from '../../parts/Exhibit.tsx';
import { RULE_TEXT } from '../../rules.ts';
import { LedgerTable } from './LedgerTable.tsx';
import { aboveFloor, LEDGER_PARTS, ledgerBars } from './ledger.ts';

interface LedgerBarsProps {
  readonly rules: readonly RuleResult[];
  readonly today: RuleResult;
  readonly floorKwh: number | undefined;
}

const percent = (share: number) => `${100 * share}%`;

/** Where the kWh of each rule go: lift by itself, then what could be argued about, and over it what lies above the floor. */
export function LedgerBars({ rules, today, floorKwh }: LedgerBarsProps) {
  const { format } = usePage();
  const bars = ledgerBars(rules, floorKwh);
  return (
    <Exhibit title={ledgerSentence(today, format)} numbers={() => <LedgerTable rules={rules} />}>
      <ul class="ledger-key" aria-hidden="true">
        {LEDGER_PARTS.map(({ part, name }) => (
          <li key={part}>
            <i class={`part ${part}`} /> {name}
          </li>
        ))}
        {floorKwh !== undefined && (
          <li>
            <i class="part above" /> above the least possible
          </li>
        )}
      </ul>
      <dl class="ledger-bars">
        {bars.map(({ rule, parts, above }) => (
          <div key={rule.rule}>
            <dt>{RULE_TEXT[rule.rule].name}</dt>
            <dd>
              <div class="bar">
                {parts.map(({ part, name, kwh, share }) => (
                  <span
                    key={part}
                    class={`part ${part}`}
                    style={{ width: percent(share) }}
                    title={`${name}: ${format.with(format.energy, kwh).full}`}
                  >
                    <span class="number">
                      <span class="unseen">{name} </span>
                      {format.bare(format.energy, kwh).text}
                    </span>
                  </span>
                ))}
              </div>
              {above && (
                <div class="above-line">
                  <span style={{ width: percent(above.from) }} />
                  <i class="part above" style={{ width: percent(above.share) }} />
                  <b>
                    {aboveFloor(rule) === 0 ? 'the least' : `${format.say(format.percent, aboveFloor(rule))} above`}
                  </b>
                </div>
              )}
            </dd>
          </div>
        ))}
      </dl>
      <p class="aside">kWh over the record. Lift is what the water gains: only less water or a lower level saves it.</p>
    </Exhibit>
  );
}

/** `By its own steps 42 % of the energy lifts the water; 31 % is above the least possible` */
export function ledgerSentence(rule: RuleResult, format: Format): string {
  const share = format.say(format.percent, (100 * rule.ledgerKwh.lift) / rule.energyKwh);
  const lift = `${sentence(asRun(rule.rule))} ${share} of the energy lifts the water`;
  const above = aboveFloor(rule);
  if (above === undefined) return lift;
  if (above === 0) return `${lift}; no other way of running these pumps takes less`;
  return `${lift}; the whole is ${format.say(format.percent, above)} above the least possible`;
}
