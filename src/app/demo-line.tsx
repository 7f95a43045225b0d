/** Demonstration mode is said on every page. */
export function DemoLine() {
  return (
    <p role="note" className="border-b border-rule bg-sheet px-4 py-1 text-note text-ink2 sm:px-6 lg:px-8">
      Demonstration: district, people and incidents are invented.
    </p>
  );
}
