import type { ComponentChildren } from 'preact';
import { useEffect, useMemo, useRef, useState } from 'preact/hooks';
import { linesOf } from '../api.ts';
import { faultsOf } from '../faults.ts';
import type { Path } from '../station.ts';
import { EditingContext } from './context.ts';
import { withValue } from './paths.ts';

interface EditorProps<File, Read> {
  readonly title: string;
  /** As it is stored, or as a new one begins. */
  readonly first: File;
  /** Whether it is stored already. */
  readonly stored: boolean;
  /** Reads the file as the server does; throws an InputError. */
  readonly read: (file: File) => Read;
  readonly save: (file: File) => Promise<void>;
  readonly onLeave: () => void;
  readonly form: (file: File, set: (path: Path, value: unknown) => void) => ComponentChildren;
  /** From the last file without a fault; null where there was none yet. */
  readonly picture: (read: Read | null, file: File) => ComponentChildren;
  /** What else can be done with what is stored. */
  readonly foot?: ComponentChildren;
}

/** A file as a form with a live picture, its faults where they stand, and nothing lost without a question. */
export function Editor<File, Read>({
  title,
  first,
  stored,
  read,
  save,
  onLeave,
  form,
  picture,
  foot,
}: EditorProps<File, Read>) {
  const [file, setFile] = useState(first);
  const [asking, setAsking] = useState(false);
  const [refused, setRefused] = useState<readonly string[]>([]);
  const [busy, setBusy] = useState(false);
  const heading = useRef<HTMLHeadingElement>(null);
  const set = (path: Path, value: unknown) => setFile((before) => withValue(before, path, value));
  const dirty = useMemo(() => JSON.stringify(file) !== JSON.stringify(first), [file, first]);
  const { faults, whole } = useMemo(() => {
    let whole: Read | null = null;
    const faults = faultsOf(() => {
      whole = read(file);
    });
    return { faults, whole: whole as Read | null };
  }, [file]);
  const last = useRef<Read | null>(null);
  if (whole !== null) last.current = whole;
  useEffect(() => heading.current?.focus(), []);
  useEffect(() => {
    if (!dirty) return;
    const leaving = (event: BeforeUnloadEvent) => event.preventDefault();
    addEventListener('beforeunload', leaving);
    return () => removeEventListener('beforeunload', leaving);
  }, [dirty]);
  const store = async () => {
    setBusy(true);
    try {
      await save(file);
    } catch (error) {
      setRefused(linesOf(error));
      setBusy(false);
    }
  };
  return (
    <main id="answer" class="editor" tabIndex={-1}>
      <h1 ref={heading} tabIndex={-1}>
        {title}
      </h1>
      <div class="edit-columns">
        <form
          aria-label={title}
          onSubmit={(event) => {
            event.preventDefault();
            if (faults.size === 0) void store();
          }}
        >
          <EditingContext.Provider value={{ file, faults, set }}>{form(file, set)}</EditingContext.Provider>
          <div class="edit-end">
            <p class="tools">
              <button type="submit" disabled={faults.size > 0 || busy || (stored && !dirty)}>
                Save
              </button>
              <button type="button" onClick={() => (dirty ? setAsking(true) : onLeave())}>
                {dirty ? 'Leave without saving' : 'Leave'}
              </button>
              {asking && (
                <span class="confirm" role="alert">
                  What you changed would be lost.{' '}
                  <button type="button" onClick={() => setAsking(false)}>
                    Stay
                  </button>{' '}
                  <button type="button" class="loses" onClick={onLeave}>
                    Lose the changes
                  </button>
                </span>
              )}
            </p>
            <div role="status">
              {faults.size > 0 && (
                <>
                  <p>
                    {faults.size === 1 ? 'One thing to mend' : `${faults.size} things to mend`} before it can be saved:
                  </p>
                  <ul class="faults">
                    {[...faults].map(([at, line]) => (
                      <li key={at}>
                        <code>{at}</code> {line}
                      </li>
                    ))}
                  </ul>
                </>
              )}
              {refused.length > 0 && <p class="faults">{refused.join(' ')}</p>}
            </div>
            {foot}
          </div>
        </form>
        <aside class={whole === null ? 'live stale' : 'live'} aria-label="Live picture">
          {picture(last.current, file)}
          {whole === null && <p class="aside">As of the last numbers without a fault.</p>}
        </aside>
      </div>
    </main>
  );
}
