'use client';

import { useState } from 'react';
import { useLive } from '@/components/live/live-provider';
import { wallClock } from '@/components/live/time';
import { Button } from '@/components/ui/button';
import { CheckField } from '@/components/ui/field';
import { Notice } from '@/components/ui/notice';
import { Problem } from '@/components/ui/problem';
import type { FieldProblem } from '@/lib/errors';
import type { UploadRefusal } from '@/lib/queries/upload';
import { routes } from '@/lib/routes';
import type { SameFile } from '@/lib/schemas/upload';
import { dueOf, HeadFields, type HeadText } from './head-fields';

interface SaveUploadProps {
  fileName: string;
  sameFile: SameFile | null;
  busy: boolean;
  refusal: UploadRefusal | null;
  /** `input` in words of a URL. */
  onSave: (input: Record<string, string>) => void;
}

/** `Larch-counter_v2.csv` is a batch called "Larch counter v2". */
function nameOf(fileName: string): string {
  const plain = fileName
    .replace(/\.[a-z]{1,4}$/i, '')
    .replaceAll(/[-_\s]+/g, ' ')
    .trim();
  return (plain.charAt(0).toUpperCase() + plain.slice(1)).slice(0, 80);
}

function SameFileNotice({ sameFile }: { sameFile: SameFile }) {
  const { nowMs, timeZone } = useLive();
  return (
    <Notice title="This very file was uploaded before.">
      <p>
        It made{' '}
        <a href={routes.batch(sameFile.batchId)} className="underline">
          {sameFile.name}, batch {sameFile.number}
        </a>
        , {wallClock(sameFile.createdAt, timeZone, nowMs)}. Saved again, all of it is cut a second time.
      </p>
    </Notice>
  );
}

/** The last step of an upload: a name, a due time, and whether to queue it. */
export function SaveUpload({ fileName, sameFile, busy, refusal, onSave }: SaveUploadProps) {
  const { timeZone } = useLive();
  const [head, setHead] = useState<HeadText>({ name: nameOf(fileName), due: '', priority: 3 });
  const [confirmed, setConfirmed] = useState(false);
  const [found, setFound] = useState<FieldProblem[]>([]);
  const same = sameFile ?? refusal?.sameFile ?? null;

  const save = (queue: boolean) => () => {
    const dueAt = dueOf(head, timeZone);
    const fields: FieldProblem[] = [
      ...(head.name.trim() === '' ? [{ path: 'name', message: 'Give the batch a name.' }] : []),
      ...(dueAt === undefined
        ? [{ path: 'dueAt', message: 'Pick a day and a time, or leave it empty.' }]
        : []),
    ];
    setFound(fields);
    if (fields.length > 0) return;
    onSave({
      name: head.name,
      ...(dueAt ? { dueAt } : {}),
      priority: String(head.priority),
      queue: String(queue),
      sameFileConfirmed: String(confirmed),
    });
  };

  return (
    <section aria-label="Save it" className="grid gap-4">
      {same ? (
        <>
          <SameFileNotice sameFile={same} />
          <CheckField
            label="I want it a second time"
            checked={confirmed}
            onChange={(event) => setConfirmed(event.target.checked)}
          />
        </>
      ) : null}
      {refusal ? <Problem title={refusal.title} fields={refusal.fields} /> : null}
      <HeadFields head={head} fields={[...found, ...(refusal?.fields ?? [])]} onChange={setHead} />
      <div className="flex flex-wrap gap-3">
        <Button look="ink" disabled={busy || (same !== null && !confirmed)} onClick={save(true)}>
          Save and queue it
        </Button>
        <Button disabled={busy || (same !== null && !confirmed)} onClick={save(false)}>
          Save as a draft
        </Button>
      </div>
    </section>
  );
}
