import { Notice } from '@/components/ui/notice';
import type { CutListProblem } from '@/lib/wire/cut-list/reading';
import { counted } from './words';

/** More are not read by anybody at once; the rest shows when these are mended. */
const SHOWN_MOST = 200;

function ProblemTable({ problems, advice }: { problems: readonly CutListProblem[]; advice: string }) {
  return (
    <div className="overflow-x-auto">
      <table className="mt-2 text-left">
        <thead>
          <tr className="border-b border-line text-sm">
            <th className="py-1 pr-6">Row</th>
            <th className="py-1 pr-6">Column</th>
            <th className="py-1 pr-6">Found</th>
            <th className="py-1">{advice}</th>
          </tr>
        </thead>
        <tbody>
          {problems.slice(0, SHOWN_MOST).map(({ row, column, found, instead }, index) => (
            <tr key={index} className="border-b border-line align-top">
              <td className="figure py-1 pr-6">{row ?? 'file'}</td>
              <td className="py-1 pr-6 font-mono text-sm">{column ?? ''}</td>
              <td className="max-w-64 py-1 pr-6 break-words">{found}</td>
              <td className="py-1 font-bold">{instead}</td>
            </tr>
          ))}
        </tbody>
      </table>
      {problems.length > SHOWN_MOST ? <p>And {problems.length - SHOWN_MOST} more.</p> : null}
    </div>
  );
}

/** What is wrong with a file: each bad cell with its row, its column and what to write instead. */
export function UploadProblems({ problems }: { problems: readonly CutListProblem[] }) {
  if (problems.length === 0) return null;
  return (
    <Notice
      title={`${counted(problems.length, 'thing')} to put right. Change the file, then choose it again.`}
      danger
    >
      <ProblemTable problems={problems} advice="Write instead" />
    </Notice>
  );
}

/** What is odd but may be saved. */
export function UploadWarnings({ warnings }: { warnings: readonly CutListProblem[] }) {
  if (warnings.length === 0) return null;
  return (
    <Notice title={`${counted(warnings.length, 'thing')} to look at twice.`}>
      <ProblemTable problems={warnings} advice="Look" />
    </Notice>
  );
}
