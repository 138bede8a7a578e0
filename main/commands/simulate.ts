import { SerialPort } from 'serialport';
import { systemClock } from '../clock.ts';
import { BUILT_IN_RIG_FILE, loadRigFile } from '../rig/rig-file.ts';
import { lineError } from '../rig/serial-port-line.ts';
import { createBuiltInRig, type Fault } from '../simulator/built-in-rig.ts';
import type { Output } from './check-rig.ts';

export interface SimulateOptions {
  readonly port: string;
  readonly seed: number;
  readonly rigFile?: string | undefined;
  /** Faults with the time at which each begins [s]. */
  readonly faults: readonly { readonly name: Fault; readonly after: number }[];
}

/** Serves the built-in rig on a real serial device or pseudo-terminal until `stop` is aborted; returns the exit code. */
export const simulate = async (
  options: SimulateOptions,
  output: Output,
  stop: AbortSignal,
): Promise<number> => {
  const result = loadRigFile(options.rigFile ?? BUILT_IN_RIG_FILE);
  if (!result.ok) {
    for (const error of result.errors) output.error(error);
    return 1;
  }
  const { rig } = result;
  const simulated = createBuiltInRig(rig, { seed: options.seed, clock: systemClock });
  const port = new SerialPort({
    path: options.port,
    baudRate: rig.serial.baudRate,
    parity: rig.serial.parity,
    stopBits: rig.serial.stopBits,
    autoOpen: false,
  });
  const opened = await new Promise<Error | null>((done) => port.open(done));
  if (opened !== null) {
    const { message, remedy } = lineError(options.port, opened);
    output.error(`${message} ${remedy}`);
    return 1;
  }
  port.on('data', (bytes: Buffer) => {
    for (const reply of simulated.receive(new Uint8Array(bytes)))
      systemClock.after(reply.delay, () => {
        if (port.isOpen) port.write(Buffer.from(reply.bytes));
      });
  });
  const timers = options.faults.map(({ name, after }) =>
    systemClock.after(after, () => simulated.fault(name)),
  );
  output.out(
    `Serving the built-in rig (simulated, unit ${rig.slaves[0]!.id}, ${rig.serial.baudRate} baud) on ${options.port}. Stop with Ctrl+C.`,
  );
  const code = await new Promise<number>((done) => {
    stop.addEventListener('abort', () => done(0), { once: true });
    if (stop.aborted) done(0);
    port.on('close', () => done(stop.aborted ? 0 : 1));
  });
  for (const cancel of timers) cancel();
  if (port.isOpen) await new Promise((done) => port.close(done));
  else if (code !== 0) output.error(`${options.port} is gone. Start again when it is back.`);
  return code;
};
