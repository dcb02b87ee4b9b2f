import { Notice } from '@/components/ui/notice';
import { ERRORS } from '@/lib/errors';

/** What a person who may not write batches finds at the address of a form. */
export function WritersOnly() {
  return (
    <div className="page py-6">
      <Notice title={ERRORS['not-allowed'].title} danger />
    </div>
  );
}
