/** The product's name with its mark: a staff gauge standing in water. */
export function Wordmark() {
  return (
    <span className="inline-flex items-center gap-2 text-lead font-semibold text-ink">
      <svg viewBox="0 0 22 24" className="h-6 w-5.5" fill="none" stroke="currentColor" strokeWidth="1.75" strokeLinecap="square" aria-hidden="true">
        <path d="M3 1.5v21M3 2.5h7M3 7h4M3 11.5h7M3 16h4M3 20.5h7" />
        <path d="M11.5 12.5c1.7-1.7 3.3-1.7 5 0s2.7 1.7 4.3.2M11.5 17c1.7-1.7 3.3-1.7 5 0s2.7 1.7 4.3.2" className="stroke-kingfisher" />
      </svg>
      Downreach
    </span>
  );
}
