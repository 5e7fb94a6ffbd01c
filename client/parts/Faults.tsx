interface FaultsProps {
  readonly lines: readonly string[];
}

/** What is wrong with what was asked, read out as it comes; nothing where nothing is. */
export function Faults({ lines }: FaultsProps) {
  if (lines.length === 0) return null;
  return (
    <p class="faults" role="alert">
      {lines.join(' ')}
    </p>
  );
}
