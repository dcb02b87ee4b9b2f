const COLUMNS: [name: string, words: string][] = [
  ['label', 'what the line is called, such as A1'],
  ['length_mm', 'mm, or with a unit: 2.5in. A column length_in is read as inches'],
  ['pieces', 'a whole number'],
  ['gauge_awg', 'such as 30'],
  ['insulation', 'such as ETFE'],
  ['colour', 'IEC 60757 letters, such as GN or RDBU'],
  ['tolerance_minus_mm', 'may be left out: then the workshop’s own'],
  ['tolerance_plus_mm', 'may be left out'],
];

/** The columns of a cut list in words. */
export function ColumnWords() {
  return (
    <section aria-labelledby="columns-title">
      <h2 id="columns-title" className="mb-2 text-xl">
        Columns
      </h2>
      <dl className="grid gap-y-1 sm:grid-cols-[14rem_1fr]">
        {COLUMNS.map(([name, words]) => (
          <div key={name} className="contents">
            <dt className="font-mono text-sm">{name}</dt>
            <dd className="text-soft">{words}</dd>
          </div>
        ))}
      </dl>
      <p className="mt-3 text-soft">
        In any order, with a header row. Commas, semicolons or tabs; points or decimal commas.
      </p>
    </section>
  );
}
