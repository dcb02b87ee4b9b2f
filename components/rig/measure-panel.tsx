'use client';

import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { Keypad } from '@/components/ui/keypad';
import { useRunAction } from '@/components/runs/use-run-action';
import type { RunDto } from '@/lib/schemas/run';
import { toleranceWords } from './words';

const LENGTH_CHARACTERS = 7;

/** A typed length as mm; null while it is none. Accepts a decimal comma. */
export function typedLengthMm(text: string): number | null {
  const value = Number(text.replace(',', '.'));
  return text.trim() !== '' && Number.isFinite(value) && value > 0 ? value : null;
}

function judge(run: RunDto, lengthMm: number | null): string {
  if (lengthMm === null) return '';
  const offMm = Math.round((lengthMm - run.lengthMm) * 100) / 100;
  if (offMm < -run.toleranceMinusMm) return `too short by ${(-offMm - run.toleranceMinusMm).toFixed(2)} mm`;
  if (offMm > run.tolerancePlusMm) return `too long by ${(offMm - run.tolerancePlusMm).toFixed(2)} mm`;
  return 'within tolerance';
}

/** First pieces: lengths by keypad, each judged at once; the run goes on only when they are entered. */
export function MeasurePanel({ run }: { run: RunDto }) {
  const pieces = run.piecesToMeasure;
  const [texts, setTexts] = useState<Record<number, string>>({});
  const [at, setAt] = useState(pieces[0] ?? 0);
  const measure = useRunAction('measurePieces');
  const lengths = pieces.map((piece) => ({ piece, lengthMm: typedLengthMm(texts[piece] ?? '') }));
  const known = lengths.flatMap(({ piece, lengthMm }) => (lengthMm === null ? [] : [{ piece, lengthMm }]));
  const type = (piece: number) => (text: string) => setTexts((old) => ({ ...old, [piece]: text }));
  const next = pieces[pieces.indexOf(at) + 1];
  return (
    <section aria-labelledby="measure" className="flex flex-wrap gap-8">
      <div className="grow">
        <h2 id="measure" className="text-xl">
          Measure the first pieces
        </h2>
        <p>
          Against a stop on a rule: {run.lengthMm} mm,{' '}
          {toleranceWords(run.toleranceMinusMm, run.tolerancePlusMm)}. Look at both ends too: a nicked or
          crushed one is scrap.
        </p>
        <ol className="mt-3">
          {lengths.map(({ piece, lengthMm }) => {
            const verdict = judge(run, lengthMm);
            const bad = verdict.startsWith('too');
            return (
              <li key={piece} className="flex items-center gap-4 border-b border-line py-2">
                <label htmlFor={`length-${piece}`} className="w-24">
                  Piece {piece}
                </label>
                <input
                  id={`length-${piece}`}
                  inputMode="none"
                  autoComplete="off"
                  value={texts[piece] ?? ''}
                  maxLength={LENGTH_CHARACTERS}
                  onFocus={() => setAt(piece)}
                  onChange={(event) => type(piece)(event.target.value)}
                  className={`figure h-16 w-40 rounded-[2px] border bg-sheet px-4 text-2xl ${at === piece ? 'border-2 border-ink' : 'border-tick'}`}
                />
                <span>mm</span>
                {bad ? <span aria-hidden className="hatch h-4 w-6" /> : null}
                <span className={bad ? 'font-bold' : 'text-soft'}>{verdict}</span>
              </li>
            );
          })}
        </ol>
        {measure.problem ? (
          <p role="alert" className="mt-2 font-bold text-signal">
            {measure.problem.title} {measure.problem.fields[0]?.message}
          </p>
        ) : null}
        <Button
          look="ink"
          size="rig"
          className="mt-4"
          disabled={measure.busy || known.length !== pieces.length}
          onClick={() => void measure.act({ runId: run.id, lengths: known })}
        >
          Keep these lengths
        </Button>
      </div>
      <div className="grid content-start gap-2">
        <Keypad
          label="Length"
          decimal
          value={texts[at] ?? ''}
          onChange={type(at)}
          lengthMax={LENGTH_CHARACTERS}
        />
        {next !== undefined ? (
          <Button size="rig" className="w-60" onClick={() => setAt(next)}>
            Next piece
          </Button>
        ) : null}
      </div>
    </section>
  );
}
