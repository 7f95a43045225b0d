/** Stands on every result. */
export function EstimateCaution({ className = '' }: { className?: string }) {
  return (
    <p role="note" className={`max-w-[95ch] text-note text-ink2 ${className}`}>
      Estimate for qualified people. Orders come from the incident commander and the competent authority; local rules and licensed review come first.
    </p>
  );
}
