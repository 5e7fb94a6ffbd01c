import { useEffect, useState } from 'preact/hooks';
import type { HandedSet } from '../../../server/operatorCard.ts';
import { api, linesOf } from '../../api.ts';
import { type QuestionProps, usePage } from '../../context.ts';
import { list, ordinal, sentence, typeset } from '../../format.ts';
import { useRemembered } from '../../hooks.ts';
import { Faults } from '../../parts/Faults.tsx';
import { Table } from '../../parts/Table.tsx';
import { withoutDust } from '../cost/ledger.ts';
import {
  type ComparisonCard,
  ladderSentence,
  lateText,
  MAINS,
  type MainsChoice,
  madeFrom,
  mainsOf,
  ownOrderText,
  PRESSURES,
  type Pressure,
  siOf,
} from './cardText.ts';
import { Ladder } from './Ladder.tsx';

const BASIS_TEXT = {
  drives: 'with the drives that are fitted',
  'proposed-drives': 'with drives that are proposed, not fitted yet',
  'direct-on-line': 'direct on line, without drives',
};

/** The operator's card: how many pumps at which flow. It prints on one side of paper. */
export function Card({ open, record }: Pick<QuestionProps, 'open' | 'record'>) {
  const { format, printSheet } = usePage();
  const { comparison, station } = open;
  const [pressure, setPressure] = useRemembered<Pressure>('pressure', PRESSURES, 'head');
  const [mainsChoice, setMains] = useRemembered<MainsChoice>('mains', MAINS, 'auto');
  const [band, setBand] = useState(1);
  const { card, faults } = useCard(comparison.id, band);
  const mains = mainsOf(mainsChoice, station);
  const late = card && lateText(card.lateStaging, format);
  const own = card && ownOrderText(card, format);
  const parts = (onPaper: boolean) =>
    card && <CardParts card={card} mains={mains} pressure={pressure} onPaper={onPaper} />;
  const sheet = card && (
    <>
      <p class="sheet-kind">Operator's card</p>
      <h1>{card.station}</h1>
      <p class="sheet-lead">
        {ladderSentence(card, format)} · {format.say(format.head, siOf(card).head(card.staticHead))} static head,{' '}
        {BASIS_TEXT[card.basis]}
      </p>
      {parts(true)}
      {own && <p class="late">{own}</p>}
      {late && <p class="late">{late}</p>}
      <ul class="sheet-cautions">
        {card.cautions.map((text) => (
          <li key={text}>{text}</li>
        ))}
      </ul>
      <p class="made">
        Printed {format.day(Date.now())}. From {madeFrom(comparison, record, format)}. Band {band} %.
      </p>
    </>
  );
  return (
    <section class="card" aria-labelledby="card-title">
      <h3 id="card-title">
        {card ? `The operator's card: ${leading(ladderSentence(card, format), card)}` : "The operator's card"}
      </h3>
      <p class="tools">
        <label>
          <span class="label">Pressure as</span>
          <select value={pressure} onChange={(event) => setPressure(event.currentTarget.value as Pressure)}>
            {PRESSURES.map((each) => (
              <option key={each} value={each}>
                {each === 'head' ? `head, ${format.head.unit}` : each}
              </option>
            ))}
          </select>
        </label>
        <label>
          <span class="label">Mains</span>
          <select value={mainsChoice} onChange={(event) => setMains(event.currentTarget.value as MainsChoice)}>
            <option value="auto">{mainsOf('auto', station)} Hz, taken from its units</option>
            <option value="50">50 Hz</option>
            <option value="60">60 Hz</option>
          </select>
        </label>
        <label>
          <span class="label">Band</span>
          <select value={band} onChange={(event) => setBand(Number(event.currentTarget.value))}>
            {[0.5, 1, 2, 3, 5].map((each) => (
              <option key={each} value={each}>
                {each} %
              </option>
            ))}
          </select>
        </label>
        <button type="button" disabled={card === null} onClick={() => sheet && printSheet('card', sheet)}>
          Print the card
        </button>
      </p>
      <Faults lines={faults} />
      {card && (
        <>
          <p class="aside">
            {sentence(BASIS_TEXT[card.basis])}. A pump comes on where going on without it costs {band} % more, and goes
            off where going on with it does; between the two, shaded, leave things as they are.
          </p>
          {parts(false)}
          {own && <p class="late">{own}</p>}
          {late && <p class="late">{late}</p>}
        </>
      )}
    </section>
  );
}

/** A sentence that goes on behind a colon; one that begins with the name of a pump keeps its capital. */
function leading(text: string, { alike }: Pick<ComparisonCard, 'alike'>): string {
  return alike ? text.charAt(0).toLowerCase() + text.slice(1) : text;
}

interface CardPartsProps {
  readonly card: ComparisonCard;
  readonly mains: number;
  readonly pressure: Pressure;
  /** The one side of paper has no room to say things twice. */
  readonly onPaper: boolean;
}

function CardParts({ card, mains, pressure, onPaper }: CardPartsProps) {
  const { format } = usePage();
  const { flow, head } = siOf(card);
  const { moves, levels, sets } = card;
  const crossing = (value: number | null | undefined) =>
    value == null ? 'none' : format.bare(format.flow, flow(value)).text;
  return (
    <>
      {sets.length > 0 && !onPaper && (
        <p class="aside">
          At each flow the best set of all. The table says what it saves against the best that can be had in the
          station's own order, {list(card.pumps)}.
        </p>
      )}
      <Ladder card={card} mains={mains} pressure={pressure} />
      <div class="card-tables">
        {moves && card.steps.length > 0 && sets.length === 0 && (
          <Table
            caption="How the step moves with static head"
            rows={card.steps}
            keyOf={(step) => String(step.to)}
            name={{
              head: 'Same power',
              cell: (step) => (card.alike ? `${step.from} and ${step.to} pumps` : `with and without ${step.pump}`),
            }}
            columns={[
              {
                head: `Lowest, ${format.say(format.head, head(moves.low.staticHead))}`,
                unit: format.flow.unit,
                cell: (step) => crossing(moves.low.flows[step.from - 1]),
              },
              {
                head: `Now, ${format.say(format.head, head(card.staticHead))}`,
                unit: format.flow.unit,
                cell: (step) => (step.crossings.length === 0 ? 'none' : step.crossings.map(crossing).join(', ')),
              },
              {
                head: `Highest, ${format.say(format.head, head(moves.high.staticHead))}`,
                unit: format.flow.unit,
                cell: (step) => crossing(moves.high.flows[step.from - 1]),
              },
            ]}
          />
        )}
        {levels.length > 0 && (
          <Table
            caption="Start and stop levels"
            rows={levels.map((level, i) => ({ ...level, place: i + 1 }))}
            keyOf={(level) => String(level.place)}
            name={{
              head: 'Pump',
              cell: (level) =>
                card.alike
                  ? sentence(ordinal(level.place))
                  : (card.pumps[level.place - 1] ?? sentence(ordinal(level.place))),
            }}
            columns={[
              {
                head: 'Start',
                unit: format.head.unit,
                cell: (level) => format.bare(format.head, head(level.start)).text,
              },
              {
                head: 'Stop',
                unit: format.head.unit,
                cell: (level) => format.bare(format.head, head(level.stop)).text,
              },
            ]}
          />
        )}
        {sets.length > 0 && !onPaper && <SetTable sets={sets} card={card} />}
      </div>
      {card.notes.length > 0 && (
        <ul class="notes card-notes">
          {card.notes.map((note) => (
            <li key={note.code + note.text}>{typeset(note.text)}</li>
          ))}
        </ul>
      )}
    </>
  );
}

/** For pumps that differ the count does not say who runs: the best set as flow rises. */
function SetTable({ sets, card }: { readonly sets: readonly HandedSet[]; readonly card: ComparisonCard }) {
  const { format } = usePage();
  const { flow } = siOf(card);
  return (
    <Table
      caption="Which pumps, as flow rises"
      rows={sets}
      keyOf={(set) => String(set.from)}
      name={{ head: 'From', unit: format.flow.unit, cell: (set) => format.bare(format.flow, flow(set.from)).text }}
      columns={[
        { head: 'To', unit: format.flow.unit, cell: (set) => format.bare(format.flow, flow(set.to)).text },
        { head: 'Run', words: true, cell: (set) => `${list(set.pumps) || 'none'}${set.rests ? ', with rests' : ''}` },
        { head: 'Change', words: true, cell: (set) => set.text || 'none' },
        {
          head: 'Saves against own order',
          unit: 'kW',
          cell: (set) =>
            set.savedKw === null ? 'cannot' : format.bare(format.power, withoutDust(set.savedKw, 1)).text,
        },
      ]}
    />
  );
}

function useCard(comparisonId: number, bandPercent: number) {
  const [state, setState] = useState<{ card: ComparisonCard | null; faults: readonly string[] }>({
    card: null,
    faults: [],
  });
  useEffect(() => {
    const asking = new AbortController();
    api.card(comparisonId, { bandPercent }, asking.signal).then(
      (card) => setState({ card, faults: [] }),
      (error) => asking.signal.aborted || setState({ card: null, faults: linesOf(error) }),
    );
    return () => asking.abort();
  }, [comparisonId, bandPercent]);
  return state;
}
