/** The edge of a rule, drawn as a row of ticks along the foot of the page's head: one tick each 8 px, long each 80 px. */
export function Ruler() {
  return (
    <svg aria-hidden className="block h-3.5 w-full text-tick" preserveAspectRatio="none">
      <defs>
        <pattern id="ruler-ticks" width="80" height="14" patternUnits="userSpaceOnUse">
          {[8, 16, 24, 32, 48, 56, 64, 72].map((x) => (
            <path key={x} d={`M${x + 0.5} 14V8`} stroke="currentColor" />
          ))}
          <path d="M40.5 14V5" stroke="currentColor" />
          <path d="M0.5 14V0" stroke="currentColor" />
        </pattern>
      </defs>
      <rect width="100%" height="14" fill="url(#ruler-ticks)" />
    </svg>
  );
}
