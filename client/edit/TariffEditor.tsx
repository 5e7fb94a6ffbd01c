import { readTariff, type TariffFile } from '../../server/tariff/tariffFile.ts';
import { api, type TariffBody } from '../api.ts';
import { Confirm } from './Confirm.tsx';
import { Editor } from './Editor.tsx';
import { PricesPicture } from './PricesPicture.tsx';
import { TariffForm } from './TariffForm.tsx';

interface TariffEditorProps {
  readonly stored: TariffBody | null;
  readonly first: TariffFile;
  readonly onSaved: (tariff: TariffBody) => void;
  readonly onLeave: () => void;
  readonly onRemoved: () => void;
  readonly onFault: (error: unknown) => void;
}

/** A tariff, entered from scratch or changed, over its week of prices. */
export function TariffEditor({ stored, first, onSaved, onLeave, onRemoved, onFault }: TariffEditorProps) {
  return (
    <Editor
      title={stored ? `Edit ${stored.name}` : 'A new tariff'}
      first={first}
      stored={stored !== null}
      // Which days a country keeps is known to the server, and not needed for the picture.
      read={(file) => readTariff(file, 'tariff.json', () => [])}
      save={async (file) =>
        onSaved(stored ? await api.keepTariff(stored.id, file) : await api.addTariff(file, 'tariff.json'))
      }
      onLeave={onLeave}
      form={(file) => <TariffForm file={file} />}
      picture={(tariff) => tariff && <PricesPicture tariff={tariff} />}
      foot={
        stored && (
          <p>
            <Confirm
              ask="Remove this tariff"
              says={`${stored.name} would be gone; comparisons made with it stay.`}
              does="Remove it for good"
              onDo={() => void api.removeTariff(stored.id).then(onRemoved, onFault)}
            />
          </p>
        )
      }
    />
  );
}
