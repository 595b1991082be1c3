import { describe, expect, it } from "vitest";
import { CURVE_ERROR, countedOctets, ReceptionCurves, receptionRatio } from "#shared/network/reception.ts";
import { PHYS, radioSchema } from "#shared/scenario/round-schema.ts";

const db = (level: number) => 10 ** (level / 10);
const formula = radioSchema.parse({ phy: "le-1m" }).reception;

describe("the tabulated curve", () => {
  it.each(PHYS)("of %s lies within its error bound of the exact one, for the shortest and the longest packet", (phy) => {
    const curves = new ReceptionCurves(phy, formula);
    for (const bytes of [0, 24, phy === "ieee802154" ? 125 : 255]) {
      const curve = curves.of(bytes);
      let worst = 0;
      for (let level = -40; level <= 40; level += 0.0013) {
        const difference = curve(db(level)) - receptionRatio(phy, formula, bytes, db(level));
        worst = Math.max(worst, Math.abs(difference));
      }
      expect(worst).toBeLessThan(CURVE_ERROR);
      expect(curve(0)).toBe(0);
      expect(curve(1e30)).toBe(1);
    }
  });

  it("never falls while the signal rises", () => {
    const curve = new ReceptionCurves("ieee802154", formula).of(24);
    let before = 0;
    for (let sinr = 0; sinr < 6; sinr += 0.0007) {
      const ratio = curve(sinr);
      expect(ratio).toBeGreaterThanOrEqual(before);
      before = ratio;
    }
  });
});

describe("reception", () => {
  it("counts the octets after the synchronisation", () => {
    expect(countedOctets("ieee802154", 18)).toBe(20);
    expect(countedOctets("le-2m", 20)).toBe(25);
  });

  // By hand: Eb/N0 = SINR B/R = 10, BER = 1/2 exp(-5), 25 octets.
  it("of Bluetooth LE 1M and 2M is that of binary FSK at the same signal-to-noise ratio", () => {
    const wanted = (1 - 0.5 * Math.exp(-5)) ** 200;
    expect(receptionRatio("le-1m", formula, 20, 10)).toBeCloseTo(wanted, 12);
    expect(receptionRatio("le-2m", formula, 20, 10)).toBeCloseTo(wanted, 12);
  });

  it("of the coded PHYs is that of LE 1M with the gain more", () => {
    expect(receptionRatio("le-coded-s8", formula, 20, db(2))).toBeCloseTo(receptionRatio("le-1m", formula, 20, db(10)), 12);
    expect(receptionRatio("le-coded-s2", formula, 20, db(6))).toBeCloseTo(receptionRatio("le-1m", formula, 20, db(10)), 12);
  });

  it("of a longer packet is worse", () => {
    expect(receptionRatio("ieee802154", formula, 100, db(0))).toBeLessThan(receptionRatio("ieee802154", formula, 10, db(0)));
  });

  it("from an uploaded table is a straight line over dB between its rows, and constant outside, for every length", () => {
    const { reception } = radioSchema.parse({
      phy: "ieee802154",
      reception: {
        type: "table",
        rows: [
          { snrDb: -2, prr: 0.1 },
          { snrDb: 0, prr: 0.3 },
          { snrDb: 4, prr: 0.95 },
        ],
      },
    });
    const curves = new ReceptionCurves("ieee802154", reception);
    const wanted = [
      [-30, 0.1],
      [-2, 0.1],
      [-1, 0.2],
      [0, 0.3],
      [1, 0.4625],
      [4, 0.95],
      [50, 0.95],
    ] as const;
    for (const [level, ratio] of wanted) {
      expect(curves.of(10)(db(level))).toBeCloseTo(ratio, 12);
      expect(receptionRatio("ieee802154", reception, 99, db(level))).toBeCloseTo(ratio, 12);
    }
  });
});
