import { usePage } from '../../context.ts';
import { ordinal } from '../../format.ts';
import {
  type ComparisonCard,
  type Ladder as LadderShape,
  ladderOf,
  type Pressure,
  pressureMeasure,
  siOf,
  speedText,
} from './cardText.ts';

interface LadderProps {
  readonly card: ComparisonCard;
  readonly mains: number;
  readonly pressure: Pressure;
}

const percent = (share: number) => `${100 * share}%`;

/** One hue, and more pumps are darker; the style sheet mixes it, so that it follows light, dark and paper. */
export function countShade(count: number, most: number): string {
  const share = most < 2 ? 0.5 : Math.min(1, Math.max(0, (count - 1) / (most - 1)));
  return `color-mix(in srgb, var(--count-last) ${Math.round(100 * share)}%, var(--count-first))`;
}

/** The steps as a ladder to the scale of flow; beside each rung what to do there, and at what speed and pressure. */
export function Ladder({ card, mains, pressure }: LadderProps) {
  const { format } = usePage();
  const ladder = ladderOf(card);
  if (ladder === null) return <p>No pump can lift the static head, so there is no step to make.</p>;
  const { flow, head } = siOf(card);
  const sayFlow = (value: number) => format.say(format.flow, flow(value));
  const measure = pressureMeasure(pressure, format);
  const header = (at: { headerHead: number; headerKpa: number }) =>
    format.say(measure, pressure === 'head' ? head(at.headerHead) : at.headerKpa);
  const turns = { mains, ratedSpeedRpm: card.ratedSpeedRpm };
  const most = card.capacities.length;
  return (
    <div
      class={card.steps.length > 5 ? 'ladder many' : 'ladder'}
      style={{ '--steps': String(Math.max(1, card.steps.length)) }}
    >
      <div class="rail-of-flow" aria-hidden="true">
        <span class="end top">{sayFlow(ladder.top)}</span>
        <span class="end foot">0</span>
        {ladder.counts.map(({ count, from, to }) => (
          <div
            key={count}
            class="count"
            style={{ bottom: percent(from), height: percent(to - from), background: countShade(count, most) }}
          />
        ))}
        {ladder.rungs.map(({ to, dropOff, bringOn }) => (
          <div key={to} class="band" style={{ bottom: percent(dropOff), height: percent(bringOn - dropOff) }} />
        ))}
        {ladder.counts.map(({ count, middle }) => (
          <b key={count} style={{ bottom: percent(middle) }}>
            {count}
          </b>
        ))}
      </div>
      <Leaders ladder={ladder} />
      <ol class="rungs">
        {[...card.steps].reverse().map((step) => (
          <li key={step.to}>
            <p class="on">
              <span aria-hidden="true">▲</span> {ordinal(step.to)} pump on at <b>{sayFlow(step.bringOn)}</b>
            </p>
            <p class="turns">
              {card.basis === 'direct-on-line' ? (
                'full speed, direct on line'
              ) : (
                <>
                  {speedText(step.atBringOn.speedBefore, turns, format)} →{' '}
                  {speedText(step.atBringOn.speedAfter, turns, format)}
                </>
              )}
              ; <span class="figure">header {header(step.atBringOn)}</span>
            </p>
            <p class="off">
              <span aria-hidden="true">▼</span> {ordinal(step.to)} pump off at <b>{sayFlow(step.dropOff)}</b>
            </p>
            <p class="turns">
              {card.basis !== 'direct-on-line' && (
                <>
                  {speedText(step.atDropOff.speedAfter, turns, format)} →{' '}
                  {speedText(step.atDropOff.speedBefore, turns, format)};{' '}
                </>
              )}
              <span class="figure">header {header(step.atDropOff)}</span>
            </p>
            <p class="why">{step.text}</p>
          </li>
        ))}
        {card.steps.length === 0 && (
          <li>
            <p class="on">
              One pump, up to <b>{sayFlow(ladder.top)}</b>
            </p>
          </li>
        )}
      </ol>
    </div>
  );
}

/** Lines from each rung to where it is told. */
function Leaders({ ladder }: { readonly ladder: LadderShape }) {
  return (
    <svg class="leaders" viewBox="0 0 10 100" preserveAspectRatio="none" aria-hidden="true">
      {ladder.rungs.map(({ to, bringOn, dropOff, told }) => (
        <path
          key={to}
          d={`M0 ${100 - 50 * (bringOn + dropOff)} L10 ${100 - 100 * told}`}
          fill="none"
          stroke="currentColor"
          vector-effect="non-scaling-stroke"
        />
      ))}
    </svg>
  );
}
