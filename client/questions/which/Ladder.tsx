import type { HandedSpeed, HandedStep } from '../../../server/operatorCard.ts';
import { usePage } from '../../context.ts';
import { list, ordinal } from '../../format.ts';
import { setText } from '../../runners.ts';
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

/** A set with less of the ladder's height than this has no room for its name. */
const LEAST_NAMED = 0.045;

/** Less than this is not worth a line. */
const LEAST_SAVED_KW = 0.05;

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
  const { flow } = siOf(card);
  const sayFlow = (value: number) => format.say(format.flow, flow(value));
  const { rungs, zones } = ladder;
  const most = card.sets.length > 0 ? zones.length : card.capacities.length;
  const many = rungs.length > (card.sets.length > 0 ? 9 : 5) ? 'many' : '';
  return (
    <div
      class={`ladder ${many} ${card.sets.length > 0 ? 'of-sets' : ''}`}
      style={{ '--steps': String(Math.max(1, card.sets.length > 0 ? zones.length : rungs.length)) }}
    >
      <div class="rail-of-flow" aria-hidden="true">
        <span class="end top">{sayFlow(ladder.top)}</span>
        <span class="end foot">0</span>
        {zones.map(({ id, from, to }) => (
          <div
            key={id}
            class="count"
            style={{ bottom: percent(from), height: percent(to - from), background: countShade(id, most) }}
          />
        ))}
        {rungs.map(({ id, dropOff, bringOn }) => (
          <div key={id} class="band" style={{ bottom: percent(dropOff), height: percent(bringOn - dropOff) }} />
        ))}
        {zones
          .filter(({ from, to }) => card.sets.length === 0 || to - from > LEAST_NAMED)
          .map(({ id, name, middle }) => (
            <b key={id} style={{ bottom: percent(middle) }}>
              {name}
            </b>
          ))}
      </div>
      <Leaders ladder={ladder} />
      {card.sets.length > 0 ? (
        <SetRungs card={card} mains={mains} pressure={pressure} />
      ) : (
        <CountRungs card={card} mains={mains} pressure={pressure} top={sayFlow(ladder.top)} />
      )}
    </div>
  );
}

/** Head or pressure of the header as the reader wants it. */
function useHeader({ card, pressure }: Pick<LadderProps, 'card' | 'pressure'>) {
  const { format } = usePage();
  const { head } = siOf(card);
  const measure = pressureMeasure(pressure, format);
  return (at: { readonly headerHead: number; readonly headerKpa: number }) =>
    format.say(measure, pressure === 'head' ? head(at.headerHead) : at.headerKpa);
}

/** Equal pumps, or pumps in the station's order: one more comes on, or goes off. */
function CountRungs({ card, mains, pressure, top }: LadderProps & { readonly top: string }) {
  const { format } = usePage();
  const { flow } = siOf(card);
  const header = useHeader({ card, pressure });
  const sayFlow = (value: number) => format.say(format.flow, flow(value));
  const turns = { mains, ratedSpeedRpm: card.ratedSpeedRpm };
  const who = ({ to, pump }: HandedStep) => (card.alike ? `${ordinal(to)} pump` : pump);
  return (
    <ol class="rungs">
      {[...card.steps].reverse().map((step) => (
        <li key={step.to}>
          <p class="on">
            <span aria-hidden="true">▲</span> {who(step)} on at <b>{sayFlow(step.bringOn)}</b>
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
            <span aria-hidden="true">▼</span> {who(step)} off at <b>{sayFlow(step.dropOff)}</b>
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
            {card.alike ? 'One pump' : card.pumps[0]}, up to <b>{top}</b>
          </p>
        </li>
      )}
    </ol>
  );
}

/** Pumps that differ: which to add and to drop, and which then run. */
function SetRungs({ card, mains, pressure }: LadderProps) {
  const { format } = usePage();
  const { flow } = siOf(card);
  const header = useHeader({ card, pressure });
  const sayFlow = (value: number) => format.say(format.flow, flow(value));
  const speeds = (set: readonly HandedSpeed[]) =>
    list(
      set.map(({ pump, speed, rpm, onDrive }) =>
        onDrive
          ? `${pump} at ${speedText(speed, { mains, ratedSpeedRpm: rpm === null ? null : rpm / speed }, format)}`
          : `${pump} at full speed`,
      ),
    );
  return (
    <ol class="rungs">
      {card.sets
        .map((set, i) => ({ ...set, below: card.sets[i - 1] }))
        .reverse()
        .map(({ from, pumps, text, rests, savedKw, change, below }) => (
          <li key={from}>
            {change && below ? (
              <>
                <p class="on">
                  <span aria-hidden="true">▲</span> {text} at <b>{sayFlow(change.bringOn)}</b>
                </p>
                <p class="turns">
                  then {speeds(change.after)}
                  {rests && ', with rests'}; <span class="figure">header {header(change)}</span>
                </p>
                <p class="off">
                  <span aria-hidden="true">▼</span> back to {setText(below.pumps.join('+'))} at{' '}
                  <b>{sayFlow(change.dropOff)}</b>
                </p>
                {savedKw !== null && savedKw >= LEAST_SAVED_KW && (
                  <p class="why">saves {format.say(format.power, savedKw)} against the station's own order</p>
                )}
              </>
            ) : (
              <p class="on">
                {pumps.length === 0 ? 'No set of pumps can run' : `${list(pumps)} from 0${rests ? ', with rests' : ''}`}
              </p>
            )}
          </li>
        ))}
    </ol>
  );
}

/** Lines from each rung to where it is told. */
function Leaders({ ladder }: { readonly ladder: LadderShape }) {
  return (
    <svg class="leaders" viewBox="0 0 10 100" preserveAspectRatio="none" aria-hidden="true">
      {ladder.rungs.map(({ id, bringOn, dropOff, told }) => (
        <path
          key={id}
          d={`M0 ${100 - 50 * (bringOn + dropOff)} L10 ${100 - 100 * told}`}
          fill="none"
          stroke="currentColor"
          vector-effect="non-scaling-stroke"
        />
      ))}
    </svg>
  );
}
