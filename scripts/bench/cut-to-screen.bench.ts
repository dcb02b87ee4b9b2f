/**
 * `cut-to-screen [--minutes N]`: from the jaws of a virtual rig closing, by its own tally, to the event in a signed-in
 * page, with all eight rigs of the demo cutting short pieces as fast as they can.
 */
import { setTimeout as pause } from 'node:timers/promises';
import { openBrowser } from '@/tests/support/chromium';
import { openBareRelay, type BareRelay } from './cut-to-screen/bare-relay';
import { matchPieces, type PieceSeen, type Sighting } from './cut-to-screen/match';
import { openScreen, readSightings } from './cut-to-screen/screen';
import { sightingOf } from './cut-to-screen/sighting';
import { summarise } from './cut-to-screen/summary';
import { openBusyFloor, type BusyFloor } from './floor/floor';
import { LENGTH_MM } from './floor/queue-work';
import { readRigSpeed } from './floor/rig-speed';
import { readClosings } from './floor/tallies';
import { readMinutes } from './minutes';
import { reportResult } from './result';

const DEFAULT_MINUTES = 2;
/** Start, first pieces and trays take time of their own. */
const EXTRA_MINUTES = 3;
/** As often as eight rigs cut, some 17 times a second. */
const RELAY_EVERY_MS = 60;
/** A piece that is not on the screen by then never will be. */
const LAST_EVENTS_MS = 3_000;

type Told = Sighting & { rigId: string };

async function relayFor(relay: BareRelay, untilMs: number): Promise<void> {
  while (Date.now() < untilMs) {
    await relay.send();
    await pause(RELAY_EVERY_MS);
  }
}

/** Of all rigs the pieces whose jaws closed within the window. */
function piecesWithin(floor: BusyFloor, told: readonly Told[], fromMs: number, untilMs: number): PieceSeen[] {
  const closings = readClosings(floor.dataDir);
  return floor.rigs
    .flatMap(({ id, name }) =>
      matchPieces(
        closings.get(name) ?? [],
        told.filter(({ rigId }) => rigId === id),
      ),
    )
    .filter(({ closedAtMs }) => closedAtMs >= fromMs && closedAtMs < untilMs);
}

async function measure(minutes: number): Promise<void> {
  const heard: Told[] = [];
  const floor = await openBusyFloor(minutes + EXTRA_MINUTES, (message, atMs) => {
    const sighting = sightingOf(message, atMs);
    if (sighting) heard.push(sighting);
  });
  const browser = await openBrowser();
  try {
    const screen = await openScreen(browser, floor.url, floor.cookies);
    const relay = await openBareRelay(browser);
    const fromMs = Date.now();
    const untilMs = fromMs + minutes * 60_000;
    console.log(`All rigs are cutting; measuring for ${minutes} min`);
    await Promise.race([relayFor(relay, untilMs), floor.failed]);
    await Promise.race([pause(LAST_EVENTS_MS), floor.failed]);
    // The client without a browser has listened from the start: it knows the runs that ended before the page opened.
    const shown = await readSightings(screen);
    const opened = heard.filter(({ atMs }) => atMs < (shown[0]?.atMs ?? Infinity));
    reportResult(
      summarise({
        onScreen: piecesWithin(floor, [...opened, ...shown], fromMs, untilMs),
        withoutBrowser: piecesWithin(floor, heard, fromMs, untilMs),
        relayMs: await relay.delaysMs(),
        settings: {
          rigs: floor.rigs.length,
          minutes,
          lengthMm: LENGTH_MM,
          rigSpeed: readRigSpeed(floor.dataDir),
        },
      }),
    );
    await relay.close();
  } finally {
    await browser.close();
    await floor.close();
  }
}

await measure(readMinutes(DEFAULT_MINUTES));
process.exit();
