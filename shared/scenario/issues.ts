/** What is wrong with a scenario, as data. */
export interface Issue {
  /** Stable, for programs: "out-of-range", "unknown-field", "round-does-not-fit", ... */
  code: string;
  /** Where, as written in the file: "loops[0].plant.cartMassKg". */
  path: string;
  /** Rule, value and permitted range, for people. */
  message: string;
  /** What would help, largest effect first. */
  help?: string[];
}
