import { LinkButton } from '@/components/ui/button';
import { WireSwatch } from '@/components/ui/wire-swatch';
import { routes } from '@/lib/routes';
import type { RigSetupDto } from '@/lib/schemas/setup-rigs';
import { Row, Rows } from '../sides';
import { missingOf } from './missing';

/** The rigs in bench order, each with what it still lacks before it can cut. */
export function RigRows({ rigs }: { rigs: RigSetupDto[] }) {
  return (
    <Rows label="Rigs" none="No rig yet. Add the first one, then give it a profile and its interlock notes.">
      {rigs.map((rig) => (
        <Row
          key={rig.id}
          name={rig.name}
          act={<LinkButton href={routes.setupRig(rig.id)}>Set up {rig.name}</LinkButton>}
        >
          <p>
            {rig.bay || 'no bay'} · {rig.agentName ?? 'no agent'}
          </p>
          <p className="text-soft">
            {rig.spool ? <WireSwatch wire={rig.spool.wire} /> : 'no spool'} · profile{' '}
            {rig.profileVersion ?? 'none'} · notes {rig.notesVersion ?? 'none'}
          </p>
          <Missing rig={rig} />
        </Row>
      ))}
    </Rows>
  );
}

/** One sentence: what keeps the rig from cutting. */
export function Missing({ rig }: { rig: RigSetupDto }) {
  const missing = missingOf(rig);
  if (rig.outOfServiceReason) return <p className="font-bold">Out of service: {rig.outOfServiceReason}</p>;
  return missing.length > 0 ? <p className="font-bold">Still needs {missing.join(', ')}.</p> : null;
}
