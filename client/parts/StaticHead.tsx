import { HEAD_UNITS } from '../../server/units.ts';
import { type QuestionProps, usePage } from '../context.ts';
import { Touch } from './Touch.tsx';

/** The static head of the station, to be tried out: more than any other number it decides what drives can do. */
export function StaticHead({ saved, draft, touch }: Pick<QuestionProps, 'saved' | 'draft' | 'touch'>) {
  const { format } = usePage();
  return (
    <Touch
      label="Static head"
      measure={format.head}
      fileFactor={HEAD_UNITS[draft.units.head]}
      value={draft.system.staticHead}
      saved={saved.system.staticHead}
      onChange={(value) => touch(['system', 'staticHead'], value)}
    />
  );
}
