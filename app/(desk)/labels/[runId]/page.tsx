import type { Metadata } from 'next';
import { notFound } from 'next/navigation';
import { z } from 'zod';
import { datedClock } from '@/components/live/time';
import { BagLabel } from '@/components/label/bag-label';
import { PrintButton } from '@/components/label/print-button';
import { ScanBag } from '@/components/label/scan-bag';
import { LinkButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { pageContext } from '@/lib/auth/page-context';
import { qrCodeSvg } from '@/lib/http/barcode';
import { routes } from '@/lib/routes';
import { readLabel } from '@/lib/services/floor/read-label';
import { readWorkshop } from '@/lib/services/workshop/read-workshop';

export const metadata: Metadata = { title: 'Label' };

const paramsSchema = z.object({ runId: z.uuid() });

export default async function LabelPage({ params }: { params: Promise<unknown> }) {
  const parsed = paramsSchema.safeParse(await params);
  if (!parsed.success) notFound();
  const ctx = await pageContext();
  const [label, workshop] = await Promise.all([
    readLabel({ ctx, input: parsed.data }),
    readWorkshop({ ctx }),
  ]);
  const { bag } = label;
  return (
    <>
      <div className="no-print">
        <PageHead
          title={`Label of bag ${bag.code}`}
          actions={
            <>
              <PrintButton />
              <LinkButton href={routes.floor()} size="rig">
                To the floor
              </LinkButton>
            </>
          }
        >
          {label.confirmed
            ? 'Stick it on the bag before you empty the next tray.'
            : 'Print it, stick it on the bag, put the empty tray back, then scan it.'}
        </PageHead>
        {label.confirmed ? null : <ScanBag code={bag.code} />}
      </div>
      <div className="page py-6">
        <BagLabel
          bag={bag}
          barcodeSvg={qrCodeSvg(bag.code)}
          at={datedClock(bag.clearedAt, workshop.timeZone)}
        />
      </div>
    </>
  );
}
