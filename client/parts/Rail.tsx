import { QUESTIONS, type QuestionId } from '../answers.ts';

interface RailProps {
  readonly answers: Readonly<Record<QuestionId, string>> | null;
  readonly current: QuestionId;
  readonly busy: boolean;
  readonly onOpen: (id: QuestionId) => void;
}

/** The four questions, each with its answer before anyone opens it. */
export function Rail({ answers, current, busy, onOpen }: RailProps) {
  return (
    <nav class="rail" aria-label="Questions">
      <ol aria-live="polite" aria-busy={busy}>
        {QUESTIONS.map(({ id, title }) => (
          <li key={id}>
            <a
              href={`#${id}`}
              aria-current={id === current ? 'true' : undefined}
              onClick={(event) => {
                event.preventDefault();
                onOpen(id);
              }}
            >
              <span class="question">{title}</span>
              <span class="answer">{answers?.[id] ?? (busy ? 'working it out…' : 'not answered yet')}</span>
            </a>
          </li>
        ))}
      </ol>
    </nav>
  );
}
