import { useCallback, useEffect, useId, useMemo, useState } from 'preact/hooks';
import type { ComparisonBody } from '../../../server/api.ts';
import type { RuleSeries } from '../../../server/staging/pictures.ts';
import type { RuleId } from '../../../server/staging/result.ts';
import { api, linesOf } from '../../api.ts';
import { drawRecord } from '../../chart/record.ts';
import { usePage } from '../../context.ts';
import { type Format, list, sentence } from '../../format.ts';
import { Picture } from '../../parts/Picture.tsx';
import { Table } from '../../parts/Table.tsx';
import { RULE_TEXT, ruleName } from '../../rules.ts';
import { neighbour, recordSteps, type Span, timeTicks, WINDOWS, type WindowKind, windowAt } from '../../series.ts';

interface RecordPictureProps {
  readonly comparison: ComparisonBody;
  readonly whole: Span;
  readonly duty: number;
}

const WINDOW_NAMES: Record<WindowKind, string> = { day: 'Day', week: 'Week', month: 'Month', all: 'All' };
const TICKS = 8;

/** The record over time with the pumps that a rule chose; a part of it on a press, its neighbours on the arrow keys. */
export function RecordPicture({ comparison, whole, duty }: RecordPictureProps) {
  const { format } = usePage();
  const ids = comparison.rules.map((rule) => rule.rule);
  const [chosen, setChosen] = useState<RuleId>('best-count');
  const rule = ids.includes(chosen) ? chosen : ids[0]!;
  const [kind, setKind] = useState<WindowKind>('all');
  const [span, setSpan] = useState<Span>(whole);
  const { series, faults } = useSeries(comparison.id, rule, span, kind);
  const zone = format.timeZone;
  const middle = (span.fromMs + span.toMs) / 2;
  const zoom = (next: WindowKind) => {
    setKind(next);
    setSpan(windowAt(next, Math.min(Math.max(middle, whole.fromMs), whole.toMs - 1), whole, zone));
  };
  const shift = (direction: -1 | 1) => {
    const next = neighbour(kind, span, direction, whole, zone);
    if (next) setSpan(next);
  };
  const selectId = useId();
  const record = useMemo(
    () => (series ? { ...recordSteps(series, format, duty), ...(kind !== 'all' && span) } : null),
    [series, format, duty],
  );
  const draw = useCallback<Parameters<typeof Picture>[0]['draw']>(
    (canvas, look) => {
      const ticks = timeTicks(record!, zone, TICKS);
      const texts = {
        ticks,
        tickText: (ms: number) => format.tick(ms, ticks.step),
        instantText: (ms: number) => format.instant(ms),
      };
      return drawRecord(canvas, record!, texts, look);
    },
    [record, format, zone],
  );
  const tools = (
    // biome-ignore lint/a11y/noStaticElementInteractions: the arrow keys are a short cut for the two buttons within
    <div
      class="tools no-print"
      onKeyDown={(event) => {
        if (event.target instanceof HTMLSelectElement) return;
        if (event.key === 'ArrowLeft') shift(-1);
        if (event.key === 'ArrowRight') shift(1);
      }}
    >
      <label for={selectId}>
        Rule{' '}
        <select id={selectId} value={rule} onChange={(event) => setChosen(event.currentTarget.value as RuleId)}>
          {ids.map((id) => (
            <option key={id} value={id}>
              {RULE_TEXT[id].name}
            </option>
          ))}
        </select>
      </label>
      <fieldset class="choices">
        <legend class="unseen">Part of the record</legend>
        {WINDOWS.map((each) => (
          <button key={each} type="button" aria-pressed={kind === each} onClick={() => zoom(each)}>
            {WINDOW_NAMES[each]}
          </button>
        ))}
      </fieldset>
      <fieldset class="choices">
        <legend class="unseen">Move through the record</legend>
        <button type="button" disabled={neighbour(kind, span, -1, whole, zone) === null} onClick={() => shift(-1)}>
          Earlier
        </button>
        <button type="button" disabled={neighbour(kind, span, 1, whole, zone) === null} onClick={() => shift(1)}>
          Later
        </button>
      </fieldset>
      <span>
        {format.day(span.fromMs)} to {format.day(span.toMs - 1)}
      </span>
    </div>
  );
  if (faults.length > 0) return <p role="alert">{faults.join(' ')}</p>;
  if (series === null || record === null) return <p aria-busy="true">Reading the record…</p>;
  if (series.startMs.length === 0) {
    return (
      <>
        {tools}
        <p>No value in this part of the record.</p>
      </>
    );
  }
  return (
    <Picture
      title={recordSentence(series, rule, format)}
      height="tall"
      draw={draw}
      numbers={() => <SeriesNumbers series={series} />}
    >
      {tools}
    </Picture>
  );
}

/** What is to be seen: how often the rule changes the count, and the most it runs. */
function recordSentence(series: RuleSeries, rule: RuleId, format: Format): string {
  const most = Math.max(...series.mostCount);
  const peak = Math.max(...series.mostFlowM3s);
  const gaps = series.startMs.filter((startMs, i) => i > 0 && startMs - series.endMs[i - 1]! > 500).length;
  const gapText = gaps === 0 ? '' : `; ${gaps === 1 ? 'one gap is' : `${gaps} gaps are`} left open`;
  if (series.pumps.length > 0) {
    return sentence(`${ruleName(rule)} runs ${list(sharesOf(series, format))} of the time${gapText}`);
  }
  const count = most === 0 ? 'no pump' : most === 1 ? 'one pump' : `up to ${most} pumps`;
  return sentence(`${ruleName(rule)} runs ${count} for flows up to ${format.say(format.flow, peak)}${gapText}`);
}

/** How much of the time shown each pump runs, most first: `Beck 63 %` */
function sharesOf({ pumps, startMs, endMs }: RuleSeries, format: Format): string[] {
  const length = startMs.map((from, i) => endMs[i]! - from);
  const whole = length.reduce((sum, each) => sum + each, 0);
  return pumps
    .map(({ name, share }) => ({ name, share: share.reduce((sum, each, i) => sum + each * length[i]!, 0) / whole }))
    .sort((a, b) => b.share - a.share)
    .map(({ name, share }) => `${name} ${share === 0 ? 'none' : format.say(format.percent, 100 * share)}`);
}

/** Who ran in a bucket: `Beck, Jockey for 24 %` */
function ranText({ pumps }: RuleSeries, i: number, format: Format): string {
  const ran = pumps.flatMap(({ name, share }) => {
    const part = share[i]!;
    if (part <= 0) return [];
    return [part >= 1 - 1e-9 ? name : `${name} for ${format.say(format.percent, 100 * part)}`];
  });
  return ran.length === 0 ? 'none' : ran.join(', ');
}

function SeriesNumbers({ series }: { readonly series: RuleSeries }) {
  const { format } = usePage();
  const column = (head: string, unit: string, text: (i: number) => string) => ({
    head,
    ...(unit !== '' && { unit }),
    cell: text,
  });
  return (
    <Table
      caption={series.exact ? 'Intervals shown' : 'The record in as many parts as the picture has; each a mean'}
      tall
      rows={series.startMs.map((_, i) => i)}
      keyOf={String}
      name={{ head: 'From', cell: (i) => format.instant(series.startMs[i]!) }}
      columns={[
        column('To', '', (i) => format.instant(series.endMs[i]!)),
        column('Flow', format.flow.unit, (i) => format.bare(format.flow, series.flowM3s[i]).full),
        column('Power', 'kW', (i) => format.bare(format.power, series.powerKw[i]).full),
        ...(series.pumps.length > 0
          ? [{ ...column('Running', '', (i) => ranText(series, i, format)), words: true }]
          : [
              column('Pumps, mean', '', (i) => format.bare(format.plain, series.count[i]).full),
              column('Pumps, most', '', (i) => String(series.mostCount[i])),
            ]),
        column('Shortfall', format.volume.unit, (i) => format.bare(format.volume, series.shortfallM3[i]).full),
      ]}
    />
  );
}

function useSeries(comparisonId: number, rule: RuleId, span: Span, kind: WindowKind) {
  const [state, setState] = useState<{ series: RuleSeries | null; faults: readonly string[] }>({
    series: null,
    faults: [],
  });
  useEffect(() => {
    const asking = new AbortController();
    api.series(comparisonId, rule, kind === 'all' ? {} : span, asking.signal).then(
      (series) => setState({ series, faults: [] }),
      (error) => {
        if (!asking.signal.aborted) setState({ series: null, faults: linesOf(error) });
      },
    );
    return () => asking.abort();
  }, [comparisonId, rule, span, kind]);
  return state;
}
