'use client';

import { useEffect, useRef } from 'react';
import type { PairingOfferDto } from '@/lib/schemas/setup-agents';

/** The one-time code, shown this once, and the file that carries it to the rig's computer. */
export function PairingOffer({
  offer,
  rigNames,
  serverUrl,
}: {
  offer: PairingOfferDto;
  rigNames: string[];
  serverUrl: string;
}) {
  const place = useRef<HTMLElement>(null);
  useEffect(() => place.current?.focus(), [offer.code]);
  const config = {
    server: serverUrl,
    dataDir: './agent',
    pairingCode: offer.code,
    rigs: rigNames.map((rig, index) => ({ rig, port: `/dev/ttyUSB${index}` })),
  };
  return (
    <section
      ref={place}
      tabIndex={-1}
      aria-label={`Pairing code of ${offer.agentName}`}
      className="grid gap-3 border-y border-ink bg-sheet p-4"
    >
      <p className="font-bold">Pairing code of {offer.agentName}</p>
      <output className="figure text-4xl tracking-wide select-all">{offer.code}</output>
      <p>
        Shown this once; it works once, within 30 minutes. On the rig’s computer write this file, with the
        right ports, and start the agent with it:
      </p>
      <pre className="overflow-x-auto border border-line bg-linen p-3 font-mono text-sm select-all">
        {JSON.stringify(config, null, 2)}
      </pre>
      <code className="font-mono text-sm">npm run agent -- --config agent.json</code>
    </section>
  );
}
