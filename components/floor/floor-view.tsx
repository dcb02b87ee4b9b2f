'use client';

import { useQuery } from '@tanstack/react-query';
import { floorQuery } from '@/lib/queries/floor';
import type { FloorDto } from '@/lib/schemas/floor';
import { FloorHead } from './floor-head';
import { RigRow } from './rig-row';

/** The floor: what is to be done, then the rigs in bench order, never resorted under a finger. */
export function FloorView({ initial }: { initial: FloorDto }) {
  const { data } = useQuery({ ...floorQuery(), initialData: initial });
  const rigs = [...data.rigs].sort((a, b) => a.benchOrder - b.benchOrder);
  return (
    <>
      <FloorHead rigs={rigs} waiting={data.waiting} />
      <ul aria-label="Rigs">
        {rigs.map((rig) => (
          <RigRow key={rig.id} rig={rig} />
        ))}
      </ul>
    </>
  );
}
