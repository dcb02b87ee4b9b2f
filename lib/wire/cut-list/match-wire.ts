import type { WireDto } from '@/lib/schemas/stock';
import { colourCode, type WireColour } from '@/lib/wire/colour';
import { wireName } from '@/lib/wire/name';

/** What a line of a cut list says of its wire; `conductor` is empty unless the file has such a column. */
export interface WantedWire {
  gaugeAwg: number;
  insulation: string;
  colour: WireColour;
  conductor: string;
}

export type WireMatch = { ok: true; wire: WireDto } | { ok: false; found: string; instead: string };

const NEAR_MOST = 3;

function plain(text: string): string {
  return text.toLowerCase().replaceAll(/[^\p{L}\p{N}]/gu, '');
}

const named = (wire: WireDto): string => `${wireName(wire)} ${wire.insulation}`;

/** 0 is the same wire; a gauge next door is nearer than another colour. */
function distance(wire: WireDto, wanted: WantedWire): number {
  const gauge = Math.abs(wire.gaugeAwg - wanted.gaugeAwg);
  const colour = wire.colour === colourCode(wanted.colour) ? 0 : 4;
  const insulation = plain(wire.insulation) === plain(wanted.insulation) ? 0 : 1;
  return gauge + colour + insulation;
}

function nearOnes(wires: readonly WireDto[], wanted: WantedWire): WireDto[] {
  return wires
    .map((wire) => ({ wire, away: distance(wire, wanted) }))
    .filter(({ away }) => away <= 4)
    .toSorted((a, b) => a.away - b.away)
    .slice(0, NEAR_MOST)
    .map(({ wire }) => wire);
}

function unknown(wires: readonly WireDto[], wanted: WantedWire): WireMatch {
  const found = `${colourCode(wanted.colour)} ${wanted.gaugeAwg} AWG ${wanted.insulation}`.trimEnd();
  const near = nearOnes(wires, wanted).map(named);
  const offer = near.length === 0 ? '' : `Write one of these: ${near.join('; ')}. Or `;
  const add = `${offer === '' ? 'Add' : 'add'} this wire in set-up first.`;
  return { ok: false, found: `${found}, which is no wire here`, instead: `${offer}${add}` };
}

/** Finds the wire of a line among the workshop's, case and punctuation aside; else says which are near. */
export function matchWire(wires: readonly WireDto[], wanted: WantedWire): WireMatch {
  const fitting = wires.filter(
    (wire) =>
      wire.gaugeAwg === wanted.gaugeAwg &&
      wire.colour === colourCode(wanted.colour) &&
      plain(wire.insulation) === plain(wanted.insulation) &&
      (wanted.conductor === '' || plain(wire.conductor) === plain(wanted.conductor)),
  );
  const [wire, second] = fitting;
  if (!wire) return unknown(wires, wanted);
  if (!second) return { ok: true, wire };
  const conductors = fitting.map((one) => one.conductor).join(' or ');
  return {
    ok: false,
    found: `${named(wire)}, of which there are ${fitting.length}`,
    instead: `Add a column conductor and write ${conductors}.`,
  };
}
