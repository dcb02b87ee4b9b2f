import type { CutListReading } from '@/lib/wire/cut-list/reading';
import type { ServiceContext } from '../context';
import { listWires } from '../wires/list-wires';
import { readWorkshop } from '../workshop/read-workshop';
import { readCutList } from './read-cut-list';

/** Reads an uploaded file against the workshop's wires and usual tolerances. */
export async function readUpload(ctx: ServiceContext, bytes: Uint8Array): Promise<CutListReading> {
  const wires = await listWires({ ctx });
  const { toleranceMinusMm, tolerancePlusMm } = await readWorkshop({ ctx });
  return readCutList(bytes, { wires, defaults: { toleranceMinusMm, tolerancePlusMm } });
}
