import type { Difference } from '../station.ts';

interface DraftProps {
  readonly changes: readonly Difference[];
  readonly onKeep: () => void;
  readonly onDrop: () => void;
  readonly faults: readonly string[];
}

/** What differs from the saved station, until it is kept or dropped. */
export function Draft({ changes, onKeep, onDrop, faults }: DraftProps) {
  return (
    <section class="draft" aria-label="Changes not kept">
      <p role="status">
        {changes.length > 0 && (
          <>
            <span class="mark">what if</span> Differs from the saved station in{' '}
            {changes
              .map(({ path, saved, draft }) => `${path.join('.')} (${short(saved)} to ${short(draft)})`)
              .join(', ')}
            .
          </>
        )}
      </p>
      {changes.length > 0 && (
        <p class="no-print">
          <button type="button" onClick={onKeep}>
            Keep
          </button>{' '}
          <button type="button" onClick={onDrop}>
            Drop
          </button>
        </p>
      )}
      {faults.length > 0 && <p role="alert">{faults.join(' ')}</p>}
    </section>
  );
}

function short(value: number): string {
  return String(Number(value.toPrecision(6)));
}
