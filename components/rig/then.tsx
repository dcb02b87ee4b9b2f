import type { RunDto } from '@/lib/schemas/run';

/** What will happen after the button, in order. */
export function Then({ run }: { run: RunDto }) {
  const first = Math.min(run.firstPieces, run.pieces);
  const rest = run.pieces - run.cut - first;
  return (
    <section aria-labelledby="then" className="mt-6">
      <h2 id="then" className="mb-1 text-xl">
        Then
      </h2>
      <p>It homes, and one trim cut, not counted, thrown away.</p>
      {first > 0 ? <p>{first} pieces, then the rig waits while you measure them.</p> : null}
      {rest > 0 ? <p>Then the other {rest}.</p> : null}
    </section>
  );
}
