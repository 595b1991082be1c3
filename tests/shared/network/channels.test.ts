import { describe, expect, it } from "vitest";
import { channelBand, channelOfStep, channelPlan, channelRange, channelsInUse, hopPlace, shareInBand, wifiBands } from "#shared/network/channels.ts";
import { radioSchema } from "#shared/scenario/round-schema.ts";

const wifi = (name: string) => {
  const found = [20, 22, 40].flatMap((width) => wifiBands(width as 20 | 22 | 40)).find((band) => band.name === name);
  if (!found) throw new Error(name);
  return found;
};

describe("channels of a PHY", () => {
  it("are refused outside of the standard's", () => {
    expect(channelRange("ieee802154")).toEqual({ first: 11, last: 26, usual: 26 });
    expect(channelRange("le-coded-s8")).toEqual({ first: 0, last: 39, usual: 39 });
    expect(() => channelBand("ieee802154", 10)).toThrow("channel 10 is not one of 11 to 26");
    expect(() => channelBand("le-1m", 40)).toThrow("channel 40 is not one of 0 to 39");
  });

  it("take in 2 MHz, or 1 MHz with LE 1M and coded", () => {
    expect((["ieee802154", "le-2m", "le-1m", "le-coded-s2"] as const).map((phy) => channelBand(phy, 20).bandwidthMHz)).toEqual([2, 2, 1, 1]);
  });

  it("are the last one when none is listed", () => {
    expect(channelsInUse(radioSchema.parse({ phy: "ieee802154" }))).toEqual([26]);
    expect(channelsInUse(radioSchema.parse({ phy: "le-2m" }))).toEqual([39]);
    expect(channelsInUse(radioSchema.parse({ phy: "le-2m", channels: { list: [3, 1] } }))).toEqual([3, 1]);
    expect(channelsInUse(radioSchema.parse({ phy: "ieee802154", channels: { list: [3, 12, 30] } }))).toEqual([12]);
  });
});

describe("overlap", () => {
  it("is the share of the sender's power that falls into the receiver's band", () => {
    const receiver = { centreMHz: 2440, bandwidthMHz: 2 };
    expect(shareInBand({ centreMHz: 2437, bandwidthMHz: 20 }, receiver)).toBe(0.1);
    expect(shareInBand({ centreMHz: 2440, bandwidthMHz: 1 }, receiver)).toBe(1);
    expect(shareInBand({ centreMHz: 2441.5, bandwidthMHz: 2 }, receiver)).toBe(0.25);
    expect(shareInBand({ centreMHz: 2442, bandwidthMHz: 2 }, receiver)).toBe(0);
  });

  // The four channels between Wi-Fi 1, 6 and 11: common knowledge of 2.4 GHz planning, and by hand from the bands.
  it("leaves channels 15, 20, 25 and 26 free beside Wi-Fi 1, 6 and 11 of 20 MHz", () => {
    const plan = channelPlan("ieee802154", ["Wi-Fi 1, 20 MHz", "Wi-Fi 6, 20 MHz", "Wi-Fi 11, 20 MHz"].map(wifi));
    expect(plan.filter(({ overlaps }) => overlaps.length === 0).map(({ channel }) => channel)).toEqual([15, 20, 25, 26]);
    expect(plan.find(({ channel }) => channel === 17)?.overlaps).toEqual([{ name: "Wi-Fi 6, 20 MHz", share: 0.1 }]);
    expect(plan).toHaveLength(16);
  });

  it("names the stronger share first", () => {
    const narrow = { name: "Video link", centreMHz: 2405, bandwidthMHz: 4 };
    expect(channelPlan("ieee802154", [wifi("Wi-Fi 1, 22 MHz"), narrow])[0]?.overlaps.map(({ name }) => name)).toEqual([
      "Video link",
      "Wi-Fi 1, 22 MHz",
    ]);
  });

  it("knows Wi-Fi's channels, 14 with DSSS only, and pairs for 40 MHz", () => {
    expect(wifi("Wi-Fi 1, 20 MHz").centreMHz).toBe(2412);
    expect(wifi("Wi-Fi 13, 20 MHz").centreMHz).toBe(2472);
    expect(wifi("Wi-Fi 14, 22 MHz").centreMHz).toBe(2484);
    expect(wifiBands(20).some(({ name }) => name.startsWith("Wi-Fi 14"))).toBe(false);
    expect(wifi("Wi-Fi 1 + 5, 40 MHz")).toMatchObject({ centreMHz: 2422, bandwidthMHz: 40 });
    expect(wifiBands(40).at(-1)).toMatchObject({ name: "Wi-Fi 9 + 13, 40 MHz", centreMHz: 2462 });
  });
});

describe("hopping", () => {
  const radio = (hopping: "none" | "per-slot" | "per-step") => radioSchema.parse({ phy: "ieee802154", channels: { list: [15, 20, 26], hopping } });
  const always = { everyRounds: 1, firstRound: 0 };
  const steps = [1, 2, 3, 4];

  it("stays, or goes on with every slot or step, in the order of the list", () => {
    expect(steps.map((step) => channelOfStep(radio("none"), always, 2, 5, step))).toEqual([15, 15, 15, 15]);
    expect(steps.map((step) => channelOfStep(radio("per-slot"), always, 1, 0, step))).toEqual([20, 20, 20, 20]);
    expect(steps.map((step) => channelOfStep(radio("per-step"), always, 0, 0, step))).toEqual([15, 20, 26, 15]);
  });

  it("meets every channel in every step within as many rounds as there are channels, whatever the slot's rhythm", () => {
    for (const everyRounds of [1, 2, 3, 6]) {
      const met = [0, 1, 2].map((i) =>
        channelOfStep(radio("per-step"), { everyRounds, firstRound: 1 % everyRounds }, 4, (1 % everyRounds) + i * everyRounds, 2),
      );
      expect(new Set(met).size).toBe(3);
    }
  });

  it("does not ask how many slots there are", () => {
    expect(hopPlace("per-step", 16, 7, 2, 3)).toBe((7 + 2 + 2) % 16);
  });
});
