import type { RecordEntry } from '../../server/api.ts';
import { readStation } from '../../server/station/readStation.ts';
import type { StationFile } from '../../server/station/stationFile.ts';
import { api, type StationBody } from '../api.ts';
import { Confirm } from './Confirm.tsx';
import { Editor } from './Editor.tsx';
import { PumpsPicture } from './PumpsPicture.tsx';
import { StationForm } from './StationForm.tsx';

interface StationEditorProps {
  /** What is stored, or null for a new one. */
  readonly stored: StationBody | null;
  readonly first: StationFile;
  readonly records: readonly RecordEntry[];
  readonly onSaved: (station: StationBody) => void;
  readonly onLeave: () => void;
  /** After the station or one of its records was removed. */
  readonly onRemoved: (what: 'station' | 'record') => void;
  readonly onFault: (error: unknown) => void;
}

/** A station, entered from scratch or changed, while its curves move. */
export function StationEditor({ stored, first, records, onSaved, onLeave, onRemoved, onFault }: StationEditorProps) {
  const remove = (what: 'station' | 'record', doing: Promise<null>) => void doing.then(() => onRemoved(what), onFault);
  return (
    <Editor
      title={stored ? `Edit ${stored.name}` : 'A new station'}
      first={first}
      stored={stored !== null}
      read={(file) => readStation(file, 'station.json')}
      save={async (file) =>
        onSaved(stored ? await api.keepStation(stored.id, file) : await api.addStation(file, 'station.json'))
      }
      onLeave={onLeave}
      form={(file) => <StationForm file={file} />}
      picture={(station) => station && <PumpsPicture station={station} />}
      foot={
        stored && (
          <section class="removals" aria-label="Remove">
            {records.map((record) => (
              <p key={record.id}>
                Record {record.name}, {record.report.intervals} intervals{' '}
                <Confirm
                  ask={`Remove ${record.name}`}
                  says={`The record ${record.name} and every comparison made with it would be gone.`}
                  does="Remove it for good"
                  onDo={() => remove('record', api.removeRecord(stored.id, record.id))}
                />
              </p>
            ))}
            <p>
              <Confirm
                ask="Remove this station"
                says={`${stored.name}, its ${records.length === 1 ? 'record' : `${records.length} records`} and its comparisons would be gone.`}
                does="Remove it for good"
                onDo={() => remove('station', api.removeStation(stored.id))}
              />
            </p>
          </section>
        )
      }
    />
  );
}
