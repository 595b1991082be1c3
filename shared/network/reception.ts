/**
 * From the ratio of signal to noise and interference to the packet reception ratio (PRR). Bit errors count as independent over
 * what follows the synchronisation: the PSDU in IEEE 802.15.4 (header, payload, FCS; preamble, SFD and PHR belong to the
 * synchronisation), PDU header, payload and CRC in Bluetooth LE (after the access address). Common practice.
 */
import { fromDb } from "#shared/math/decibel.ts";
import { exp, ln } from "#shared/math/elementary.ts";
import type { Phy, Radio } from "#shared/scenario/round-schema.ts";
import { receiverBandwidthMHz } from "./channels.ts";

export type Reception = Radio["reception"];

/** (-1)^k C(16, k) for k = 2..16. */
const TERMS = [120, -560, 1820, -4368, 8008, -11440, 12870, -11440, 8008, -4368, 1820, -560, 120, -16, 1];

/**
 * IEEE Std 802.15.4-2006, annex E.4.1.8 (clause from memory), O-QPSK at 2.4 GHz: BER = 8/15 1/16 sum_{k=2}^{16} (-1)^k C(16,k)
 * exp(20 SINR (1/k - 1)); SINR linear, in the receiver's bandwidth. 0.5 without signal.
 */
export function bitErrorRate154(sinr: number): number {
  let sum = 0;
  for (let k = 2; k <= 16; k++) sum += TERMS[k - 2] * exp(20 * sinr * (1 / k - 1));
  return Math.min(0.5, Math.max(0, (8 / 15 / 16) * sum));
}

/** Non-coherent binary FSK: BER = 1/2 exp(-Eb/(2 N0)) (Proakis, Digital Communications, 4th ed., 5.4; common practice for Bluetooth LE). */
export const bitErrorRateFsk = (ebN0: number): number => 0.5 * exp(-ebN0 / 2);

/** Bit error rate of a PHY by the standard's or the common formula; coded PHYs as LE 1M with that much more signal. */
export function bitErrorRate(phy: Phy, reception: Extract<Reception, { type: "formula" }>, sinr: number): number {
  if (phy === "ieee802154") return bitErrorRate154(sinr);
  // Eb/N0 = SINR B / R; LE 1M and the coded PHYs send 1 Mbit/s in the channel, LE 2M sends 2 Mbit/s.
  const perBit = (sinr * receiverBandwidthMHz(phy)) / (phy === "le-2m" ? 2 : 1);
  if (phy === "le-coded-s2") return bitErrorRateFsk(perBit * fromDb(reception.codingGainS2Db));
  if (phy === "le-coded-s8") return bitErrorRateFsk(perBit * fromDb(reception.codingGainS8Db));
  return bitErrorRateFsk(perBit);
}

/** Octets whose bits have to be right, for a packet with so many bytes of header and payload: with FCS, or with PDU header and CRC. */
export const countedOctets = (phy: Phy, bytes: number): number => (phy === "ieee802154" ? bytes + 2 : 2 + bytes + 3);

/** (1 - BER)^(8 octets). */
export const packetReception = (ber: number, octets: number): number => exp(8 * octets * ln(1 - ber));

/** PRR at a linear SINR. `bytes`: header and payload; a table holds for packets of every length. */
export function receptionRatio(phy: Phy, reception: Reception, bytes: number, sinr: number): number {
  if (reception.type === "table") return tableRatio(reception.rows, sinr);
  return packetReception(bitErrorRate(phy, reception, sinr), countedOctets(phy, bytes));
}

const DB_PER_LN = 4.3429448190325175;

/** Straight lines over dB between the rows, constant outside. */
function tableRatio(rows: readonly { snrDb: number; prr: number }[], sinr: number): number {
  const db = DB_PER_LN * ln(sinr);
  let low = 0;
  let high = rows.length - 1;
  if (db <= rows[low].snrDb) return rows[low].prr;
  if (db >= rows[high].snrDb) return rows[high].prr;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (rows[middle].snrDb <= db) low = middle;
    else high = middle;
  }
  const { snrDb, prr } = rows[low];
  return prr + ((rows[high].prr - prr) * (db - snrDb)) / (rows[high].snrDb - snrDb);
}

/** PRR over linear SINR, quick to ask. */
export type ReceptionCurve = (sinr: number) => number;

/** Largest error of a tabulated curve; a test measures it. */
export const CURVE_ERROR = 1e-5;
const POINTS = 4096;

/**
 * SINR of point i: middle i / (POINTS - i), so that points lie dense where reception changes (1/240 dB apart in the middle),
 * reach to 0 and far out, and the place of a SINR costs one division.
 */
const sinrOf = (i: number, middle: number): number => (middle * i) / (POINTS - i);

/** Straight lines between the values at the points; 0 and 1 where the values have come close to them. */
function tabulated(values: Float64Array, middle: number): ReceptionCurve {
  const done = CURVE_ERROR / 100;
  let first = 0;
  while (first < POINTS - 2 && values[first + 1] < done) first++;
  let last = POINTS - 1;
  while (last > first + 1 && values[last - 1] > 1 - done) last--;
  const zeroBelow = sinrOf(first, middle);
  const oneAbove = sinrOf(last, middle);
  return (sinr) => {
    if (sinr >= oneAbove) return 1;
    if (sinr <= zeroBelow) return 0;
    const place = (POINTS * sinr) / (sinr + middle);
    const i = Math.min(last - 1, Math.floor(place));
    return values[i] + (place - i) * (values[i + 1] - values[i]);
  };
}

/** SINR at which one bit in a thousand is wrong: about where packets begin to be received. */
function middleOf(ber: (sinr: number) => number): number {
  let [low, high] = [0, 1000];
  for (let i = 0; i < 60; i++) {
    const middle = (low + high) / 2;
    if (ber(middle) > 1e-3) low = middle;
    else high = middle;
  }
  return high;
}

/** Quick curves, one per length of packet; bit error rates, which are slow to compute, are shared by all lengths. */
export class ReceptionCurves {
  private readonly curves = new Map<number, ReceptionCurve>();
  private readonly middle: number = 1;
  /** ln(1 - BER) at each point; null for a table of the user's. */
  private readonly lnRight: Float64Array | null = null;

  constructor(
    private readonly phy: Phy,
    private readonly reception: Reception,
  ) {
    if (reception.type === "table") return;
    const ber = (sinr: number) => bitErrorRate(phy, reception, sinr);
    this.middle = middleOf(ber);
    this.lnRight = Float64Array.from({ length: POINTS }, (_, i) => ln(1 - ber(sinrOf(i, this.middle))));
  }

  /** `bytes`: header and payload. */
  of(bytes: number): ReceptionCurve {
    const { phy, reception, lnRight, middle } = this;
    if (reception.type === "table") return (sinr) => tableRatio(reception.rows, sinr);
    let curve = this.curves.get(bytes);
    if (!curve) {
      const bits = 8 * countedOctets(phy, bytes);
      curve = tabulated(
        Float64Array.from(lnRight ?? [], (right) => exp(bits * right)),
        middle,
      );
      this.curves.set(bytes, curve);
    }
    return curve;
  }
}
