import { useLayoutEffect, useRef, useState } from 'preact/hooks';

interface ConfirmProps {
  /** On the button that asks. */
  readonly ask: string;
  /** What would be lost, in a sentence. */
  readonly says: string;
  /** On the button that does it. */
  readonly does: string;
  readonly onDo: () => void;
}

/** Asks once more, in place, before something is lost for good. */
export function Confirm({ ask, says, does, onDo }: ConfirmProps) {
  const [asking, setAsking] = useState(false);
  const stay = useRef<HTMLButtonElement>(null);
  useLayoutEffect(() => {
    if (asking) stay.current?.focus();
  }, [asking]);
  if (!asking) {
    return (
      <button type="button" class="quiet" onClick={() => setAsking(true)}>
        {ask}
      </button>
    );
  }
  return (
    <span class="confirm" role="alert">
      {says}{' '}
      <button type="button" ref={stay} onClick={() => setAsking(false)}>
        Keep it
      </button>{' '}
      <button
        type="button"
        class="loses"
        onClick={() => {
          setAsking(false);
          onDo();
        }}
      >
        {does}
      </button>
    </span>
  );
}
