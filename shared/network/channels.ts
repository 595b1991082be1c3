/** Radio channels at 2.4 GHz: where they lie, what else sends there, and in which order a flood walks through them. */
import type { Phy, Radio } from "#shared/scenario/round-schema.ts";

export interface Band {
  centreMHz: number;
  bandwidthMHz: number;
}
export interface NamedBand extends Band {
  name: string;
}

export interface ChannelRange {
  first: number;
  last: number;
  /** Used when the list of channels is empty. */
  usual: number;
}

/** IEEE Std 802.15.4-2011, 8.1.2: channels 11 to 26. Bluetooth Core Specification 5.x, Vol 6 Part A, 2: RF channels 0 to 39. */
export function channelRange(phy: Phy): ChannelRange {
  return phy === "ieee802154" ? { first: 11, last: 26, usual: 26 } : { first: 0, last: 39, usual: 39 };
}

/**
 * Width that a receiver takes in, MHz: 2 for IEEE 802.15.4 (2 Mchip/s, O-QPSK) and LE 2M, 1 for LE 1M and LE coded, which
 * send 1 Msymbol/s (common practice: about the symbol rate).
 */
export const receiverBandwidthMHz = (phy: Phy): number => (phy === "ieee802154" || phy === "le-2m" ? 2 : 1);

/** Band of a radio channel. IEEE 802.15.4: 2405 + 5 (k - 11) MHz; Bluetooth LE: 2402 + 2 k MHz. RangeError outside of the PHY's channels. */
export function channelBand(phy: Phy, channel: number): Band {
  const { first, last } = channelRange(phy);
  if (!Number.isInteger(channel) || channel < first || channel > last) throw new RangeError(`channel ${channel} is not one of ${first} to ${last}`);
  const centreMHz = phy === "ieee802154" ? 2405 + 5 * (channel - 11) : 2402 + 2 * channel;
  return { centreMHz, bandwidthMHz: receiverBandwidthMHz(phy) };
}

/** The channels in the order of hopping; never empty. What the PHY does not have is left out: the scenario's check names it. */
export function channelsInUse(radio: Radio): number[] {
  const { first, last, usual } = channelRange(radio.phy);
  const list = radio.channels.list.filter((channel) => channel >= first && channel <= last);
  return list.length > 0 ? list : [usual];
}

/** Share of the sender's power, spread evenly over its band, that falls into the receiver's band: 0 to 1. */
export function shareInBand(sender: Band, receiver: Band): number {
  const lo = Math.max(sender.centreMHz - sender.bandwidthMHz / 2, receiver.centreMHz - receiver.bandwidthMHz / 2);
  const hi = Math.min(sender.centreMHz + sender.bandwidthMHz / 2, receiver.centreMHz + receiver.bandwidthMHz / 2);
  return hi > lo ? (hi - lo) / sender.bandwidthMHz : 0;
}

/**
 * Wi-Fi at 2.4 GHz, IEEE Std 802.11-2016: channel k of 1 to 13 at 2407 + 5 k MHz, 14 at 2484 MHz (15.4.4.3, from memory);
 * 22 MHz with DSSS, 20 MHz with OFDM, 40 MHz for channels k and k + 4 together, with its centre between them (19.3.15,
 * from memory).
 */
export function wifiBands(bandwidthMHz: 20 | 22 | 40): NamedBand[] {
  const at = (name: string, centreMHz: number): NamedBand => ({ name, centreMHz, bandwidthMHz });
  if (bandwidthMHz === 40) return Array.from({ length: 9 }, (_, i) => at(`Wi-Fi ${i + 1} + ${i + 5}, 40 MHz`, 2407 + 5 * (i + 3)));
  const bands = Array.from({ length: 13 }, (_, i) => at(`Wi-Fi ${i + 1}, ${bandwidthMHz} MHz`, 2407 + 5 * (i + 1)));
  // Channel 14 is for DSSS only.
  return bandwidthMHz === 22 ? [...bands, at("Wi-Fi 14, 22 MHz", 2484)] : bands;
}

export interface PlannedChannel extends Band {
  channel: number;
  /** Bands that reach into it, strongest share first; empty: it is free. */
  overlaps: { name: string; share: number }[];
}

/** Every channel of the PHY with what overlaps it. */
export function channelPlan(phy: Phy, bands: readonly NamedBand[]): PlannedChannel[] {
  const { first, last } = channelRange(phy);
  return Array.from({ length: last - first + 1 }, (_, i) => {
    const band = channelBand(phy, first + i);
    const overlaps = bands.map((other) => ({ name: other.name, share: shareInBand(other, band) })).filter(({ share }) => share > 0);
    return { channel: first + i, ...band, overlaps: overlaps.sort((a, b) => b.share - a.share) };
  });
}

export type Hopping = Radio["channels"]["hopping"];

/**
 * Where a slot begins in the list of channels: a number that goes by its name and not by its place in the slot table, so that a
 * message more, wherever it finds room, changes no other's channels.
 */
export function hopOffset(slotId: string): number {
  let sum = 0;
  for (let i = 0; i < slotId.length; i++) sum = (sum * 31 + slotId.charCodeAt(i)) % 65_521;
  return sum;
}

/**
 * Place in the list of channels for a step. Everybody knows it without a message: `occurrence` counts how often the slot has
 * been there before, `offset` is the slot's own, `step` counts from 1. A step meets another channel whenever its slot comes again.
 */
export function hopPlace(hopping: Hopping, channels: number, occurrence: number, offset: number, step: number): number {
  if (hopping === "none") return 0;
  return (occurrence + offset + (hopping === "per-step" ? step - 1 : 0)) % channels;
}

/** Channel in use in a step of a slot, in a round in which the slot occurs. */
export function channelOfStep(
  radio: Radio,
  rhythm: { everyRounds: number; firstRound: number },
  offset: number,
  round: number,
  step: number,
): number {
  const list = channelsInUse(radio);
  const occurrence = (round - rhythm.firstRound) / rhythm.everyRounds;
  return list[hopPlace(radio.channels.hopping, list.length, occurrence, offset, step)];
}
