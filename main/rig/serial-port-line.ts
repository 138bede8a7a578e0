import { SerialPort } from 'serialport';
import { LineError, type OpenLine, type SerialLine } from './serial-line.ts';
import type { SerialSettings } from './signal.ts';

/** Opens the rig's real serial port: the fixed path, or the port whose USB identity the rig file names. */
export const serialPortOpener =
  (settings: SerialSettings): OpenLine =>
  async () => {
    const path = settings.path ?? (await findByUsb(settings));
    return openPath(path, settings);
  };

const findByUsb = async (settings: SerialSettings): Promise<string> => {
  const { usb } = settings;
  if (usb === null)
    throw new LineError(
      'missing',
      'The rig file names no serial port.',
      'Give serial.path or serial.usb in the rig file, or start with --serial PATH.',
    );
  const same = (a: string | undefined, b: string) => a?.toLowerCase() === b.toLowerCase();
  const ports = await SerialPort.list();
  const found = ports.find(
    (port) =>
      same(port.vendorId, usb.vendorId) &&
      same(port.productId, usb.productId) &&
      (usb.serialNumber === null || same(port.serialNumber, usb.serialNumber)),
  );
  if (found !== undefined) return found.path;
  throw new LineError(
    'missing',
    `No serial adapter with USB identity ${usb.vendorId}:${usb.productId} is plugged in.`,
    'Plug it in; it is found by itself.',
  );
};

const openPath = (path: string, settings: SerialSettings): Promise<SerialLine> =>
  new Promise((resolve, reject) => {
    const port = new SerialPort({
      path,
      baudRate: settings.baudRate,
      parity: settings.parity,
      stopBits: settings.stopBits,
      dataBits: 8,
      lock: true,
      autoOpen: false,
    });
    port.open((error) => (error === null ? resolve(lineOver(port)) : reject(lineError(path, error))));
  });

const lineOver = (port: SerialPort): SerialLine => {
  let closing = false;
  const lost = new Set<(error: LineError) => void>();
  const announce = (error: LineError): void => {
    if (closing) return;
    closing = true;
    for (const listener of lost) listener(error);
  };
  port.on('close', () => announce(unplugged(port.path)));
  port.on('error', (error) => announce(lineError(port.path, error)));
  return {
    name: port.path,
    write: (bytes) =>
      new Promise((resolve, reject) => {
        if (!port.isOpen) return reject(unplugged(port.path));
        port.write(Buffer.from(bytes), (error) => {
          if (error) return reject(lineError(port.path, error));
          port.drain((drainError) => (drainError ? reject(lineError(port.path, drainError)) : resolve()));
        });
      }),
    onData: (listener) => {
      const forward = (bytes: Buffer): void => listener(new Uint8Array(bytes));
      port.on('data', forward);
      return () => port.off('data', forward);
    },
    onLost: (listener) => {
      lost.add(listener);
      return () => lost.delete(listener);
    },
    close: () =>
      new Promise((resolve) => {
        closing = true;
        if (port.isOpen) port.close(() => resolve());
        else resolve();
      }),
  };
};

const unplugged = (path: string): LineError =>
  new LineError(
    'unplugged',
    `${path} is gone: the cable or the adapter was unplugged.`,
    'Plug it in again; the line is opened by itself.',
  );

/** What the operating system said, told apart and with its remedy. */
export const lineError = (path: string, error: Error): LineError => {
  const text = error.message;
  if (/no such file|cannot find|ENOENT|File not found/i.test(text))
    return new LineError(
      'missing',
      `There is no port ${path}.`,
      'Plug the adapter in, or correct the port; the Rig tab says which is meant.',
    );
  if (/permission|EACCES|access denied/i.test(text))
    return new LineError(
      'denied',
      `${path} may not be opened by this user.`,
      'On Linux add the user to the group dialout and log in again.',
    );
  if (/lock|busy|EBUSY|temporarily unavailable|EAGAIN/i.test(text))
    return new LineError('busy', `${path} is held by another program.`, 'Close it and press Reconnect.');
  if (/EIO|ENXIO|disconnected|bad file descriptor|EBADF/i.test(text)) return unplugged(path);
  return new LineError('fault', `${path}: ${text}.`, 'Check the adapter; then press Reconnect.');
};
