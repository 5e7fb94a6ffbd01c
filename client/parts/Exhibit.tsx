import type { ComponentChildren } from 'preact';
import { useState } from 'preact/hooks';

interface ExhibitProps {
  /** A sentence that says what is to be seen. */
  readonly title: string;
  /** The same numbers as a table. */
  readonly numbers: () => ComponentChildren;
  readonly children: ComponentChildren;
}

/** A picture of our own, in markup, under its sentence, with its numbers one press away. */
export function Exhibit({ title, numbers, children }: ExhibitProps) {
  const [open, setOpen] = useState(false);
  return (
    <figure class="picture">
      <figcaption>
        <h3>{title}</h3>
      </figcaption>
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
