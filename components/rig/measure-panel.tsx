'use client';

import { useState, type ReactNode } from 'react';
import { Button } from '@/components/ui/button';
import { Keypad } from '@/components/ui/keypad';
import { useRunAction } from '@/components/runs/use-run-action';
import type { RunDto } from '@/lib/schemas/run';
import { ActBar } from './act-bar';
import { StopButton } from './stop-button';
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

interface LengthRowProps {
  piece: number;
  text: string;
  verdict: string;
  chosen: boolean;
  onChoose: () => void;
  onChange: (text: string) => void;
}

function LengthRow({ piece, text, verdict, chosen, onChoose, onChange }: LengthRowProps) {
  const bad = verdict.startsWith('too');
  return (
    <li className="flex items-center gap-4 border-b border-line py-2">
      <label htmlFor={`length-${piece}`} className="w-24">
        Piece {piece}
      </label>
      <input
        id={`length-${piece}`}
        inputMode="none"
        autoComplete="off"
        value={text}
        maxLength={LENGTH_CHARACTERS}
        onFocus={onChoose}
        onChange={(event) => onChange(event.target.value)}
        className={`figure h-16 w-40 rounded-[2px] border bg-sheet px-4 text-2xl ${chosen ? 'border-2 border-ink' : 'border-tick'}`}
      />
      <span>mm</span>
      {bad ? <span aria-hidden className="hatch h-4 w-6" /> : null}
      <span className={bad ? 'font-bold' : 'text-soft'}>{verdict}</span>
    </li>
  );
}

/** First pieces: lengths by keypad, each judged at once; the run goes on only when they are entered. */
export function MeasurePanel({ run, children }: { run: RunDto; children?: ReactNode }) {
  const pieces = run.piecesToMeasure;
  const [texts, setTexts] = useState<Record<number, string>>({});
  const [at, setAt] = useState(pieces[0] ?? 0);
  const measure = useRunAction('measurePieces');
  const lengths = pieces.map((piece) => ({ piece, lengthMm: typedLengthMm(texts[piece] ?? '') }));
  const known = lengths.flatMap(({ piece, lengthMm }) => (lengthMm === null ? [] : [{ piece, lengthMm }]));
  const type = (piece: number) => (text: string) => setTexts((old) => ({ ...old, [piece]: text }));
  const next = pieces[pieces.indexOf(at) + 1];
  return (
    <>
      <div className="grid content-start gap-4">
        {children}
        <section aria-labelledby="measure">
          <h2 id="measure" className="text-xl">
            Measure the first pieces
          </h2>
          <p>
            Against a stop on a rule: {run.lengthMm} mm,{' '}
            {toleranceWords(run.toleranceMinusMm, run.tolerancePlusMm)}. Look at both ends too: a nicked or
            crushed one is scrap.
          </p>
          <ol className="mt-3">
            {lengths.map(({ piece, lengthMm }) => (
              <LengthRow
                key={piece}
                piece={piece}
                text={texts[piece] ?? ''}
                verdict={judge(run, lengthMm)}
                chosen={at === piece}
                onChoose={() => setAt(piece)}
                onChange={type(piece)}
              />
            ))}
          </ol>
          {measure.problem?.fields[0] ? (
            <p className="mt-2 font-bold">{measure.problem.fields[0].message}</p>
          ) : null}
        </section>
      </div>
      <ActBar
        problem={measure.problem}
        above={
          <Keypad
            row
            label="Length"
            decimal
            value={texts[at] ?? ''}
            onChange={type(at)}
            lengthMax={LENGTH_CHARACTERS}
          />
        }
      >
        <p>
          Piece <strong className="figure text-2xl">{at}</strong>: {texts[at] || '–'} mm
        </p>
        <div className="flex flex-wrap gap-3">
          {next !== undefined ? (
            <Button size="rig" onClick={() => setAt(next)}>
              Next piece
            </Button>
          ) : null}
          <StopButton run={run} />
          <Button
            look="ink"
            size="rig"
            disabled={measure.busy || known.length !== pieces.length}
            onClick={() => void measure.act({ runId: run.id, lengths: known })}
          >
            Keep these lengths
          </Button>
        </div>
      </ActBar>
    </>
  );
}
