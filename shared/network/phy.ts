import type { Phy } from "#shared/scenario/schema.ts";

/** Frame timing of a physical layer. `payload` counts everything the user sends: header and payload, in bytes. */
export interface PhyTiming {
  phy: Phy;
  label: string;
  /** Largest header + payload, bytes. */
  maxBytes: number;
  /** Default turnaround between two steps, ns. */
  turnaroundNs: number;
  airtimeNs(bytes: number): number;
}

const US = 1000;

/**
 * IEEE Std 802.15.4-2011, 8.1.2 and 10.3.4: O-QPSK at 2.4 GHz, 32 us an octet, preamble 4 + SFD 1 + PHR 1, PSDU of at
 * most 127 octets of which 2 are the FCS; aTurnaroundTime = 12 symbols of 16 us.
 */
const ieee802154: PhyTiming = {
  phy: "ieee802154",
  label: "IEEE 802.15.4, 2.4 GHz",
  maxBytes: 125,
  turnaroundNs: 192 * US,
  airtimeNs: (bytes) => (6 + bytes + 2) * 32 * US,
};

/**
 * Bluetooth Core Specification 5.x, Vol 6 Part B, 2.1 and 2.2: preamble, access address 4, PDU header 2, payload up to
 * 255, CRC 3; coded PHYs send FEC block 1 (preamble 80 us, address 256 us, CI 16 us, TERM1 24 us) always at S = 8, then
 * PDU, CRC and TERM2 (3 bits) at S. T_IFS = 150 us (4.1.1).
 */
const le = (phy: Phy, label: string, airtimeUs: (bytes: number) => number): PhyTiming => ({
  phy,
  label,
  maxBytes: 255,
  turnaroundNs: 150 * US,
  airtimeNs: (bytes) => airtimeUs(bytes) * US,
});
const coded = (s: number) => (bytes: number) => 376 + (8 * (2 + bytes) + 24 + 3) * s;

/** Slowest first. */
export const PHY_TIMINGS: readonly PhyTiming[] = [
  le("le-coded-s8", "Bluetooth LE coded, S = 8", coded(8)),
  le("le-coded-s2", "Bluetooth LE coded, S = 2", coded(2)),
  ieee802154,
  le("le-1m", "Bluetooth LE 1M", (bytes) => (1 + 4 + 2 + bytes + 3) * 8),
  le("le-2m", "Bluetooth LE 2M", (bytes) => (2 + 4 + 2 + bytes + 3) * 4),
];

export function phyTiming(phy: Phy): PhyTiming {
  const found = PHY_TIMINGS.find((timing) => timing.phy === phy);
  if (!found) throw new RangeError(`unknown PHY ${phy}`);
  return found;
}
