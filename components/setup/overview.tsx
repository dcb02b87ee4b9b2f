import Link from 'next/link';
import { PageHead } from '@/components/ui/page-head';
import { routes } from '@/lib/routes';
import type { AgentDto } from '@/lib/schemas/setup-agents';
import type { RigSetupDto } from '@/lib/schemas/setup-rigs';
import { missingOf } from './rigs/missing';
import { Row, Rows } from './sides';

interface OverviewProps {
  workshopName: string;
  counts: { wires: number; spools: number };
  rigs: RigSetupDto[];
  agents: AgentDto[];
}

interface Step {
  title: string;
  href: string;
  said: string;
  /** What is to be done; empty when nothing is. */
  open: string;
}

function counted(count: number, one: string, many: string): string {
  if (count === 0) return `no ${one}`;
  return `${count} ${count === 1 ? one : many}`;
}

function stepsOf({ counts, rigs, agents }: OverviewProps): Step[] {
  const unfinished = rigs.filter((rig) => !rig.outOfServiceReason && missingOf(rig).length > 0);
  const unpaired = agents.filter((agent) => agent.pairing === 'waiting' || agent.pairing === 'no code');
  const names = (list: { name: string }[]) => list.map(({ name }) => name).join(', ');
  return [
    {
      title: 'Wires',
      href: routes.setupWires(),
      said: counted(counts.wires, 'kind of wire', 'kinds of wire'),
      open: counts.wires === 0 ? 'Add the wires that your lists ask for.' : '',
    },
    {
      title: 'Spools',
      href: routes.setupSpools(),
      said: counted(counts.spools, 'spool', 'spools'),
      open: counts.spools === 0 ? 'Add the reels that you have.' : '',
    },
    {
      title: 'Rigs',
      href: routes.setupRigs(),
      said: counted(rigs.length, 'rig', 'rigs'),
      open:
        rigs.length === 0 ? 'Add your rigs.' : unfinished.length > 0 ? `Finish ${names(unfinished)}.` : '',
    },
    {
      title: 'Agents',
      href: routes.setupAgents(),
      said: counted(agents.length, 'agent', 'agents'),
      open:
        agents.length === 0
          ? 'Add an agent for the computer beside the rigs.'
          : unpaired.length > 0
            ? `Pair ${names(unpaired)}.`
            : '',
    },
  ];
}

/** What is set up, in the order in which it is done, and what stands between here and the first piece. */
export function Overview(props: OverviewProps) {
  const steps = stepsOf(props);
  const open = steps.filter((step) => step.open !== '').length;
  return (
    <>
      <PageHead title={props.workshopName}>
        {open === 0
          ? 'Everything that a piece needs is set up.'
          : `${counted(open, 'thing', 'things')} to do before every rig can cut.`}
      </PageHead>
      <div className="page max-w-4xl py-6">
        <Rows label="What is set up" none="">
          {steps.map(({ title, href, said, open: todo }) => (
            <Row
              key={title}
              name={
                <Link href={href} className="inline-flex min-h-11 items-center underline">
                  {title}
                </Link>
              }
            >
              <p className="flex min-h-11 items-center">{said}</p>
              {todo ? <p className="font-bold">{todo}</p> : null}
            </Row>
          ))}
        </Rows>
      </div>
    </>
  );
}
