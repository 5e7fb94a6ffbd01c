import type { StationEntry } from '../../server/api.ts';

interface StationsProps {
  readonly entries: readonly StationEntry[];
  readonly openId: number | null;
  /** The verdict on each, as far as it is known. */
  readonly verdicts: ReadonlyMap<number, string>;
  /** On a narrow screen the list opens on a press, so that the answers come first. */
  readonly folded: boolean;
  readonly onOpen: (id: number) => void;
}

/** The stations at hand; each says whether a change is worth it. */
export function Stations({ entries, openId, verdicts, folded, onOpen }: StationsProps) {
  const list = (
    <ul>
      {entries.map((entry) => (
        <li key={entry.id}>
          <a
            href={`?station=${entry.id}`}
            aria-current={entry.id === openId ? 'page' : undefined}
            onClick={(event) => {
              if (event.metaKey || event.ctrlKey) return;
              event.preventDefault();
              onOpen(entry.id);
            }}
          >
            <span class="name">
              {entry.name}
              {entry.demo && <span class="demo"> demo</span>}
            </span>
            <span class="verdict">{verdicts.get(entry.id) ?? (entry.records === 0 ? 'no record yet' : '…')}</span>
          </a>
        </li>
      ))}
    </ul>
  );
  return (
    <nav class="stations no-print" aria-label="Stations">
      {folded ? (
        <details>
          <summary>{entries.length === 1 ? 'One station' : `${entries.length} stations`}</summary>
          {list}
        </details>
      ) : (
        list
      )}
    </nav>
  );
}
