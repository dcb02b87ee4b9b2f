import type { RigDto } from '@/lib/schemas/floor';
import type { RunDto } from '@/lib/schemas/run';

const AT = '2026-12-01T13:00:00.000Z';
const WIRE = {
  id: '11111111-1111-4111-8111-111111111111',
  gaugeAwg: 30,
  conductor: 'silver-plated copper',
  insulation: 'ETFE',
  colour: 'BU',
  outsideDiameterMm: 0.5,
};

/** A run of 100 pieces, cutting, with 40 cut. */
export function aRun(over: Partial<RunDto> = {}): RunDto {
  return {
    id: '22222222-2222-4222-8222-222222222222',
    rigId: '33333333-3333-4333-8333-333333333333',
    rigName: 'Siskin',
    lotId: '44444444-4444-4444-8444-444444444444',
    lotNumber: 2,
    batchId: '55555555-5555-4555-8555-555555555555',
    batchName: 'Trainer C',
    batchDueAt: null,
    lineLabel: 'A1',
    wire: WIRE,
    lengthMm: 84,
    toleranceMinusMm: 0,
    tolerancePlusMm: 3,
    pieces: 100,
    cut: 40,
    scrapped: 0,
    sampled: 0,
    doubted: 0,
    bagged: 40,
    surplus: 0,
    state: 'cutting',
    stateSince: AT,
    holdReason: null,
    holdNote: '',
    doubtPiece: null,
    firstPieces: 5,
    piecesToMeasure: [],
    programHeld: true,
    expectedS: 240,
    expectedEndAt: null,
    wireNeededMm: 8400,
    startedByName: 'R. Ostrander',
    startedAt: AT,
    lastPieceAt: AT,
    endedAt: null,
    outcome: null,
    bagCode: null,
    ...over,
  };
}

/** A rig that is heard, with the run given. */
export function aRig(over: Partial<RigDto> = {}): RigDto {
  return {
    id: '33333333-3333-4333-8333-333333333333',
    at: AT,
    name: 'Siskin',
    bay: 'bay 3',
    benchOrder: 7,
    state: 'ready',
    heardAt: AT,
    connected: true,
    portProblem: null,
    agentName: 'bench-1',
    firmwareName: 'Marlin',
    virtual: true,
    virtualDisplay: null,
    signals: null,
    fitted: null,
    guardDelayS: null,
    profileVersion: 1,
    notesVersion: 1,
    workHold: null,
    outOfServiceReason: null,
    spool: null,
    blade: null,
    run: null,
    alarms: [],
    ...over,
  };
}
