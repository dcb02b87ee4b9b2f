import { LinkButton } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { routes } from '@/lib/routes';

/** Said where lines would be made, while the workshop has no wire. */
export function NoWires() {
  return (
    <div className="page py-6">
      <Notice title="The workshop has no wires yet.">
        <p className="mb-3">Enter the kinds of wire first: gauge, conductor, insulation and colour.</p>
        <LinkButton href={routes.setupWires()}>Set up wires</LinkButton>
      </Notice>
    </div>
  );
}
