import { type QuestionProps, usePage } from '../../context.ts';
import { Touch } from '../../parts/Touch.tsx';
import { numberAt } from '../../station.ts';
import { touchables } from '../../touchables.ts';

/** Numbers of the station file that can be tried out, where the file has them. */
export function StationNumbers({ saved, draft, touch }: Pick<QuestionProps, 'saved' | 'draft' | 'touch'>) {
  const { format } = usePage();
  const numbers = touchables(saved, format).filter(({ path }) => numberAt(saved, path) !== null);
  return (
    <>
      <h3 class="no-print">The station's own numbers</h3>
      <div class="touches no-print">
        {numbers.map(({ path, ...rest }) => (
          <Touch
            key={path.join('.')}
            {...rest}
            value={numberAt(draft, path)!}
            saved={numberAt(saved, path)!}
            onChange={(value) => touch(path, value)}
          />
        ))}
      </div>
    </>
  );
}
