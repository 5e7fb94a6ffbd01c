import type { ComponentChildren } from 'preact';
import { useState } from 'preact/hooks';

interface ExhibitProps {
  /** A sentence that says what is to be seen. */
  readonly title: string;
  /** The same numbers as a table. */
  readonly numbers: () => ComponentChildren;
  readonly children: ComponentChildren;
  /** Where it stands right under the title of the page, its own is of the second level. */
  readonly level?: 2 | 3;
}

/** A picture under its sentence, with its numbers one press away. */
export function Exhibit({ title, numbers, children, level = 3 }: ExhibitProps) {
  const [open, setOpen] = useState(false);
  return (
    <figure class="picture">
      <figcaption>{level === 2 ? <h2>{title}</h2> : <h3>{title}</h3>}</figcaption>
      {children}
      <div class="no-print">
        <button type="button" class="quiet numbers" aria-expanded={open} onClick={() => setOpen(!open)}>
          Numbers
        </button>
        {open && numbers()}
      </div>
    </figure>
  );
}
