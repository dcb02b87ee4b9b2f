import type { WireDto } from '@/lib/schemas/stock';
import type { ServiceContext } from '@/lib/services/context';
import { readWorkshop } from '@/lib/services/workshop/read-workshop';

/** What a new line begins with: the only wire, where there is one only, and the workshop's tolerances. */
export async function usualOf(ctx: ServiceContext, wires: readonly WireDto[]) {
  const { toleranceMinusMm, tolerancePlusMm } = await readWorkshop({ ctx });
  const [only, second] = wires;
  return {
    wireId: only && !second ? only.id : '',
    minus: String(toleranceMinusMm),
    plus: String(tolerancePlusMm),
  };
}
