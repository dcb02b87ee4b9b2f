'use client';

import { useRouter } from 'next/navigation';
import { useState } from 'react';
import { metres } from '@/components/rig/words';
import { PageHead } from '@/components/ui/page-head';
import { Problem } from '@/components/ui/problem';
import { ERRORS } from '@/lib/errors';
import { askForPreview, sendUpload, type UploadRefusal } from '@/lib/queries/upload';
import { routes } from '@/lib/routes';
import type { UploadPreview } from '@/lib/schemas/upload';
import { ColumnWords } from './column-words';
import { EXAMPLE, FileChoice } from './file-choice';
import { SaveUpload } from './save-upload';
import { UploadLines } from './upload-lines';
import { UploadProblems, UploadWarnings } from './upload-problems';
import { counted } from './words';

interface Chosen {
  file: File;
  preview: UploadPreview;
}

/** `40 lines, 712 pieces, 71 m of 8 wires`; only of what was understood. */
function summary({ lines }: UploadPreview): string {
  const pieces = lines.reduce((sum, line) => sum + (line.pieces ?? 0), 0);
  const lengthMm = lines.reduce((sum, line) => sum + (line.pieces ?? 0) * (line.lengthMm ?? 0), 0);
  const wires = new Set(lines.flatMap((line) => line.wire?.id ?? [])).size;
  return `${counted(lines.length, 'line')}, ${counted(pieces, 'piece')}, ${metres(lengthMm)} of ${counted(wires, 'wire')}`;
}

const AWAY: UploadRefusal = {
  code: 'service-away',
  title: ERRORS['service-away'].title,
  fields: [],
  sameFile: null,
};

function Understood({ chosen, busy, refusal, onSave }: UnderstoodProps) {
  const { file, preview } = chosen;
  return (
    <div className="grid gap-6" aria-live="polite">
      <p className="text-lg">
        <span className="font-mono text-base">{preview.fileName}</span>: {summary(preview)}.{' '}
        {preview.problems.length === 0 ? 'All of it was understood.' : ''}
      </p>
      <UploadProblems problems={preview.problems} />
      <UploadWarnings warnings={preview.warnings} />
      {preview.problems.length === 0 ? (
        <SaveUpload
          key={file.name + file.lastModified}
          fileName={preview.fileName}
          sameFile={preview.sameFile}
          busy={busy}
          refusal={refusal}
          onSave={onSave}
        />
      ) : null}
      {preview.lines.length > 0 ? <UploadLines lines={preview.lines} /> : null}
    </div>
  );
}

interface UnderstoodProps {
  chosen: Chosen;
  busy: boolean;
  refusal: UploadRefusal | null;
  onSave: (input: Record<string, string>) => void;
}

/** Upload of a cut list: choose, see what was understood line by line, save. */
export function UploadView() {
  const router = useRouter();
  const [chosen, setChosen] = useState<Chosen | null>(null);
  const [busy, setBusy] = useState(false);
  const [refusal, setRefusal] = useState<UploadRefusal | null>(null);

  async function look(file: File) {
    setBusy(true);
    setRefusal(null);
    setChosen(null);
    const sent = await askForPreview(file);
    setBusy(false);
    if (sent.ok) setChosen({ file, preview: sent.data });
    else setRefusal(sent.refusal);
  }

  async function lookAtExample() {
    const response = await fetch(EXAMPLE.path).catch(() => null);
    if (!response?.ok) return setRefusal(AWAY);
    await look(new File([await response.blob()], EXAMPLE.name, { type: 'text/csv' }));
  }

  async function save(file: File, input: Record<string, string>) {
    setBusy(true);
    setRefusal(null);
    const sent = await sendUpload(file, input);
    if (sent.ok) return router.push(routes.batch(sent.data.batchId));
    setBusy(false);
    setRefusal(sent.refusal);
  }

  return (
    <>
      <PageHead title="Upload a cut list">A batch from a file, one line for each length to cut.</PageHead>
      <div className="page grid gap-8 py-6">
        <FileChoice busy={busy} onFile={(file) => void look(file)} onExample={() => void lookAtExample()} />
        {busy && !chosen ? <p role="status">Reading it …</p> : null}
        {refusal && !chosen ? <Problem title={refusal.title} fields={refusal.fields} /> : null}
        {chosen ? (
          <Understood
            chosen={chosen}
            busy={busy}
            refusal={refusal}
            onSave={(input) => void save(chosen.file, input)}
          />
        ) : (
          <ColumnWords />
        )}
      </div>
    </>
  );
}
