import type { Body, BodyDescription, Limits, Muscles, Place } from '../../shared-model/body/body.ts';
import type { ReadSignal, WriteSignal } from '../../shared-model/contract/reading.ts';

export type Table = 'holding' | 'input' | 'coil' | 'discrete';
export type WireType = 'u16' | 'i16' | 'u32' | 'i32' | 'f32';

/** Where one number lies on the wire and what it means. SI value = (raw × scale + offset). */
export interface WireSignal {
  readonly slave: number;
  readonly table: Table;
  /** 0-based, as on the wire. */
  readonly address: number;
  /** 'u16' for coils and discrete inputs. */
  readonly type: WireType;
  /** Which word of a 32-bit value comes first on the wire. */
  readonly wordOrder: 'high-first' | 'low-first';
  readonly scale: number;
  readonly offset: number;
  /** Valid SI range, both ends allowed; outside it the reading is bad. */
  readonly min: number;
  readonly max: number;
  /** Raw values that mean "no reading". */
  readonly sentinels: readonly number[];
  /** The unit of the rig file, for people ('kPa', 'm', 'N', 'deg', 'm/s', ''). */
  readonly unit: string;
}

/** One device on the line. */
export interface Slave {
  readonly id: number;
  readonly name: string;
  /** Counter that the console raises every tick; the base stops by itself when it stands still for `watchdog` [s]. */
  readonly heartbeat: WireSignal | null;
  readonly watchdog: number;
  /** Word that must read `identityExpected`. */
  readonly identity: WireSignal | null;
  readonly identityExpected: number | null;
  /** Non-zero means the device reports a fault. */
  readonly faultWord: WireSignal | null;
}

export interface SerialSettings {
  /** Device path, or USB identity by which the port is found again whatever its number; null for the built-in rig. */
  readonly path: string | null;
  readonly usb: {
    readonly vendorId: string;
    readonly productId: string;
    readonly serialNumber: string | null;
  } | null;
  readonly baudRate: number;
  readonly parity: 'none' | 'even' | 'odd';
  readonly stopBits: 1 | 2;
  /** Longest time a slave takes to begin its answer [s]. */
  readonly replyTimeout: number;
  /** No valid frame for this long means the link is lost [s]. */
  readonly linkTimeout: number;
}

/** One machine, parsed from its rig file, in SI. */
export interface RigDescription {
  readonly name: string;
  readonly file: string;
  readonly simulated: boolean;
  readonly place: Place;
  readonly serial: SerialSettings;
  readonly slaves: readonly Slave[];
  readonly reads: Readonly<Partial<Record<ReadSignal, WireSignal>>>;
  readonly writes: Readonly<Partial<Record<WriteSignal, WireSignal>>>;
  readonly body: BodyDescription;
  readonly muscles: Muscles;
  readonly limits: Limits;
  /** Wired emergency stop declared: then unknown counts as pressed. */
  readonly emergencyStopWired: boolean;
  readonly camera:
    | { readonly kind: 'drawn'; readonly world: string }
    | { readonly kind: 'video'; readonly label: string | null }
    | { readonly kind: 'none' };
}

export type { Body };
