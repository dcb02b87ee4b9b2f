import type { ReactNode } from 'react';
import { datedClock } from '@/components/live/time';
import { LinkButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { routes } from '@/lib/routes';
import type { RigSetupPageDto } from '@/lib/schemas/setup-rigs';
import type { BladeDto, SpoolDto } from '@/lib/schemas/stock';
import type { SetupAction } from '../form/setup-form';
import { NotesForm } from './notes-form';
import { ProfileForm } from './profile-form';
import { BladePart, ServicePart, SpoolPart } from './rig-parts';
import { Missing } from './rig-rows';

interface RigSetupViewProps {
  page: RigSetupPageDto;
  spools: SpoolDto[];
  blades: BladeDto[];
  timeZone: string;
  rights: Record<'profile' | 'notes' | 'load' | 'blade' | 'service', boolean>;
  actions: Record<
    'fitBlade' | 'loadSpool' | 'publishNotes' | 'publishProfile' | 'returnToService' | 'takeOutOfService',
    SetupAction
  >;
}

/** Everything that is set up for one rig, the heavy things on the left, what changes by the day on the right. */
export function RigSetupView({ page, spools, blades, timeZone, rights, actions }: RigSetupViewProps) {
  const { rig, profile, notes } = page;
  return (
    <>
      <PageHead title={rig.name} actions={<LinkButton href={routes.rig(rig.id)}>To the rig</LinkButton>}>
        {rig.bay || 'no bay'} · {rig.agentName ?? 'no agent'}
        <Missing rig={rig} />
      </PageHead>
      <div className="page grid gap-x-12 gap-y-8 py-6 lg:grid-cols-[minmax(0,1fr)_22rem]">
        <div className="grid content-start gap-10">
          <Part title={`Profile, version ${rig.profileVersion ?? 'none yet'}`} open={rights.profile}>
            <ProfileForm
              key={rig.profileVersion}
              rigId={rig.id}
              profile={profile}
              action={actions.publishProfile}
            />
            <History page={page} timeZone={timeZone} />
          </Part>
          <Part title={`Interlock notes, version ${rig.notesVersion ?? 'none yet'}`} open={rights.notes}>
            <NotesForm key={rig.notesVersion} rigId={rig.id} notes={notes} action={actions.publishNotes} />
          </Part>
        </div>
        <div className="grid content-start gap-8">
          <Part title="Spool" open={rights.load}>
            <SpoolPart rig={rig} spools={spools} action={actions.loadSpool} />
          </Part>
          <Part title="Blade" open={rights.blade}>
            <BladePart rig={rig} blades={blades} action={actions.fitBlade} />
          </Part>
          <Part title="Service" open={rights.service}>
            <ServicePart rig={rig} takeOut={actions.takeOutOfService} bringBack={actions.returnToService} />
          </Part>
        </div>
      </div>
    </>
  );
}

/** A part that the person may change; else only its title stands there, and who to ask. */
function Part({ title, open, children }: { title: string; open: boolean; children: ReactNode }) {
  return (
    <section className="grid content-start gap-4">
      <h2 className="border-b border-line pb-2 text-xl">{title}</h2>
      {open ? children : <p className="text-soft">Your role does not change this.</p>}
    </section>
  );
}

function History({ page, timeZone }: { page: RigSetupPageDto; timeZone: string }) {
  if (page.profileHistory.length === 0) return null;
  return (
    <details>
      <summary className="inline-flex min-h-11 items-center underline">Earlier versions</summary>
      <ol className="border-t border-line">
        {page.profileHistory.map(({ version, reason, byName, at }) => (
          <li key={version} className="border-b border-line py-2">
            <span className="figure">{version}</span> {reason}{' '}
            <span className="text-soft">
              {byName}, {datedClock(at, timeZone)}
            </span>
          </li>
        ))}
      </ol>
    </details>
  );
}
