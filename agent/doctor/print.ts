import type { Findings, PortFinding, RigFinding } from './findings';

/** The findings as a person reads them, problems last. */
export function printFindings(findings: Findings): string {
  return [
    `${findings.software}, ${findings.configuration}`,
    findings.agentRuns ? 'The agent runs and was asked; no port was opened.' : 'No agent runs here.',
    section('Ports', findings.ports.map(portLine), 'none'),
    section('Rigs', findings.rigs.flatMap(rigLines), 'none'),
    section('Server', serverLines(findings), 'not asked'),
    section('Journal', journalLines(findings), 'none yet'),
    section('To do', findings.problems.flatMap(problemLines), 'nothing: all is well'),
  ].join('\n');
}

function section(title: string, lines: string[], none: string): string {
  return [`\n${title}`, ...(lines.length > 0 ? lines : [none]).map((line) => `  ${line}`)].join('\n');
}

function portLine({ path, vendorId, productId, serialNumber, usbPath, rigs }: PortFinding): string {
  const usb = vendorId === null ? 'not USB' : `USB ${vendorId}:${productId}`;
  const serial = serialNumber === null ? 'no serial number' : `serial number ${serialNumber}`;
  const whose = rigs.length > 0 ? `for ${rigs.join(' and ')}` : 'for no rig';
  return [path, usb, ...(vendorId === null ? [] : [serial, `socket ${usbPath ?? 'unknown'}`]), whose].join(
    ', ',
  );
}

function rigLines({ rig, means, path, firmware, signals, runner, piecesCut }: RigFinding): string[] {
  const at = path === null || path === means ? means : `${means} at ${path}`;
  return [
    `${rig}: ${at}`,
    ...(firmware ? [`  ${firmware.name}, ${firmware.machineType}, dialect ${firmware.dialect}`] : []),
    ...(signals
      ? [`  guard ${signals.guard.reading}, wire ${signals.wire.reading}, heater ${signals.heater.reading}`]
      : []),
    ...(runner ? [`  ${runner}, ${piecesCut ?? 0} pieces cut`] : []),
  ];
}

function serverLines({ server }: Findings): string[] {
  if (!server) return [];
  const { address, reachable, tokenAccepted, clockSkewMs } = server;
  const skew = clockSkewMs === null ? '' : `, clocks differ by ${(clockSkewMs / 1_000).toFixed(1)} s`;
  return [
    `${address}: ${reachable ? 'answers' : 'does not answer'}, token ${tokenAccepted ? 'accepted' : 'not accepted'}${skew}`,
  ];
}

function journalLines({ journal }: Findings): string[] {
  if (!journal) return [];
  const megabytes = (bytes: number) => (bytes / 1_048_576).toFixed(1);
  const { folder, sizeBytes, boundBytes, unacknowledged, damaged } = journal;
  return [
    `${folder}: ${megabytes(sizeBytes)} of ${megabytes(boundBytes)} MB, ${unacknowledged} events not yet acknowledged${damaged ? ', DAMAGED' : ''}`,
  ];
}

function problemLines({ about, rig, says, toDo }: Findings['problems'][number]): string[] {
  return [`${rig ?? about}: ${says}`, `  → ${toDo}`];
}
