/** Several virtual rigs in one process: `--config FILE`, a JSON list as `config.ts` describes. */
import { Command } from 'commander';
import { readBench } from './config';
import { liveUntilSignal, reportFailure } from './lifetime';
import { createVirtualRig } from './rig';

async function main(): Promise<void> {
  const flags = new Command('bench')
    .description('A bench of virtual rigs in one process.')
    .requiredOption('--config <file>', 'JSON: {"rigs":[{"name","tty","control","tally","speed",…}]}')
    .parse()
    .opts<{ config: string }>();
  const rigs = readBench(flags.config).map((rig) => createVirtualRig({ ...rig, onFailed: reportFailure }));
  await liveUntilSignal(rigs, () => console.log(`ready: ${rigs.length} virtual rigs`));
}

main().catch(reportFailure);
