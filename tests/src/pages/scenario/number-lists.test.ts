import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { channelFactsText } from "#src/components/drawings/channel-facts.ts";
import { numbersAsText, readChannels, readNumberList, toggleChannel } from "#src/pages/scenario/model/channel-text.ts";
import { readReception } from "#src/pages/scenario/model/reception-text.ts";

describe("lists of numbers as text", () => {
  it("are read back as what they were, in their order", () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 0, max: 60 }), { maxLength: 30 }), (list) => {
        expect(readNumberList(numbersAsText(list), "channel")).toEqual({ ok: true, value: list });
      }),
    );
  });
  it("take dashes, spaces and semicolons as people type them", () => {
    expect(readNumberList("11-13; 20 22, 24 to 25", "channel")).toEqual({ ok: true, value: [11, 12, 13, 20, 22, 24, 25] });
    expect(readNumberList("13 to 11", "channel")).toMatchObject({ ok: false });
    expect(readNumberList("x", "channel")).toMatchObject({ ok: false });
  });
  it("refuse a channel that is listed twice or that the PHY does not have, with what is permitted", () => {
    expect(readChannels("11, 11", "ieee802154")).toEqual({ ok: false, problem: "Channel 11 is listed twice; each stands once." });
    expect(readChannels("40", "le-1m")).toMatchObject({ problem: "There is no channel 40: Bluetooth LE 1M has 0 to 39." });
  });
  it("stay ascending when a channel is pressed, and keep an order that was typed", () => {
    expect(toggleChannel([11, 20], 15)).toEqual([11, 15, 20]);
    expect(toggleChannel([20, 11], 15)).toEqual([20, 11, 15]);
    expect(toggleChannel([20, 11], 11)).toEqual([20]);
  });
});

describe("channels beside what else sends", () => {
  const wifi6 = { name: "Wi-Fi 6", centreMHz: 2437, bandwidthMHz: 20 };
  const words = (list: number[]) =>
    channelFactsText("ieee802154", list, [wifi6])
      .replace(/[\u2009\u2060]/g, " ")
      .replaceAll("  ", " ");
  it("are told apart: clear ones, and those that are reached with the share of the sender's power", () => {
    expect(words([17, 15, 26])).toBe("Channels 15 and 26 are clear of what is shown; channel 17: Wi-Fi 6 with 10 % of its power.");
    expect(words([])).toBe("Channel 26 is clear of what is shown.");
  });
});

describe("a reception table as text", () => {
  it("is read with and without a head, with decimal commas and in per cent", () => {
    const rows = [
      { snrDb: -2.5, prr: 0.1 },
      { snrDb: 1, prr: 0.95 },
    ];
    expect(readReception("-2.5, 0.1\n1, 0.95")).toEqual({ ok: true, value: rows });
    expect(readReception("snr_db;prr\r\n-2,5;0,1\r\n1;0,95\r\n")).toEqual({ ok: true, value: rows });
    expect(readReception("\u22122.5 10%\n1 95%")).toEqual({ ok: true, value: rows });
  });
  it("says in which line a ratio is out of range or a row is missing something", () => {
    expect(readReception("0 0.5\n1 1.2")).toEqual({ ok: false, problem: "Line 2: the reception ratio is 1.2; 0 to 1 is permitted." });
    expect(readReception("0 0.5\n1")).toMatchObject({ ok: false, problem: expect.stringContaining("Line 2") });
    expect(readReception("0 0.5")).toMatchObject({ ok: false, problem: "1 rows: at least two are needed." });
  });
});
