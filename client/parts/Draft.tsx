import type { StationFile } from '../../server/station/stationFile.ts';
import { type Format, list } from '../format.ts';
import type { Difference } from '../station.ts';
import { touchables } from '../touchables.ts';

interface DraftProps {
  readonly saved: StationFile;
  readonly format: Format;
  readonly changes: readonly Difference[];
  /** Pumps taken out; they are no part of the file and are not kept. */
  readonly without: readonly string[];
  readonly onKeep: () => void;
  readonly onDrop: () => void;
  readonly faults: readonly string[];
}

/** What differs from the saved station, until it is kept or dropped. */
export function Draft({ saved, format, changes, without, onKeep, onDrop, faults }: DraftProps) {
  const texts = [
    ...changes.map((change) => differenceText(change, saved, format)),
    ...(without.length > 0 ? [`${list(without)} taken out`] : []),
  ];
  return (
    <section class="draft" aria-label="Changes not kept">
      <p role="status">
        {texts.length > 0 && (
          <>
            <span class="mark">what if</span> {texts.join(', ')}
          </>
        )}
      </p>
      {texts.length > 0 && (
        <p class="no-print">
          {changes.length > 0 && (
            <button type="button" onClick={onKeep}>
              Keep
            </button>
          )}{' '}
          <button type="button" onClick={onDrop}>
            Drop
          </button>
        </p>
      )}
      {faults.length > 0 && <p role="alert">{faults.join(' ')}</p>}
    </section>
  );
}

/** `static head 96 to 30 m`; a number without a name of its own is called by its path. */
function differenceText({ path, saved, draft }: Difference, station: StationFile, format: Format): string {
  const known = touchables(station, format).find((each) => each.path.join('.') === path.join('.'));
  const factor = known ? known.fileFactor * known.measure.factor : 1;
  const shown = (value: number) => String(Number((value * factor).toPrecision(6)));
  const name = known ? known.label.charAt(0).toLowerCase() + known.label.slice(1) : path.join('.');
  return `${name} ${shown(saved)} to ${shown(draft)} ${known?.measure.unit ?? ''}`.trim();
}
