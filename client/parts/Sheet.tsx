import type { ComponentChildren } from 'preact';
import { QUESTIONS, type QuestionId } from '../answers.ts';
import type { SheetKind } from '../context.ts';

interface SheetProps {
  readonly kind: SheetKind;
  readonly answers: Readonly<Record<QuestionId, string>> | null;
  readonly children: ComponentChildren;
}

/** One side of paper that is printed alone: the four answers at its top, as on every printed document. */
export function Sheet({ kind, answers, children }: SheetProps) {
  return (
    <article class={`sheet ${kind}-sheet`}>
      {answers && (
        <dl class="sheet-answers">
          {QUESTIONS.map(({ id, title }) => (
            <div key={id}>
              <dt>{title}</dt>
              <dd>{answers[id]}</dd>
            </div>
          ))}
        </dl>
      )}
      {children}
    </article>
  );
}
