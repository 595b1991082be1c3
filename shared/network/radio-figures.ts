/** What radios draw, as their makers print it; the first is what a scenario has unless it says otherwise. */
export interface RadioPower {
  device: string;
  txMa: number;
  rxMa: number;
  sleepUa: number;
  supplyV: number;
  source: string;
}

/** Currents from public data sheets: sending at 0 dBm, 25 °C, 3 V. */
export const RADIO_FIGURES: readonly RadioPower[] = [
  {
    device: "nRF52840, DC/DC",
    txMa: 6.4,
    rxMa: 6.53,
    sleepUa: 3.2,
    supplyV: 3,
    source: "Nordic nRF52840 product specification: 802.15.4, 0 dBm, 3 V; sleep with RTC and RAM from memory",
  },
  {
    device: "CC2340R5",
    txMa: 5.1,
    rxMa: 5.3,
    sleepUa: 0.71,
    supplyV: 3,
    source: "Texas Instruments CC2340R5 data sheet: LE 1M, 0 dBm, 3 V, DC/DC; standby with RTC and RAM as printed for the CC2340R2",
  },
  {
    device: "CC2538",
    txMa: 24,
    rxMa: 20,
    sleepUa: 1.3,
    supplyV: 3,
    source: "Texas Instruments CC2538 data sheet, all from memory: 802.15.4, 0 dBm, CPU idle, 3 V; sleep in power mode 2",
  },
  {
    device: "CC2652R",
    txMa: 7.3,
    rxMa: 6.9,
    sleepUa: 0.94,
    supplyV: 3,
    source: "Texas Instruments CC2652R data sheet: 0 dBm, 3 V, DC/DC; standby with RTC and RAM; partly from memory",
  },
];
