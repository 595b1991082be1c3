import type { Config } from "tailwindcss";

// Every value is a token of src/styles/tokens.css; the style sheet loads this file by @config.
const token = (name: string) => `var(--${name})`;
const colours = [
  ...["ground", "panel", "ink", "ink-2", "ink-3", "edge", "line", "shade"],
  ...["kelp", "on-kelp", "kelp-press", "tide", "second", "sand", "coral"],
  ...["kelp-wash", "coral-wash", "sand-wash", "water-1", "water-2", "water-3", "water-4", "bed", "tape", "veil"],
];
const text = (name: string) => [token(`t-${name}`), { lineHeight: token(`l-${name}`) }] as [string, { lineHeight: string }];

export default {
  content: [],
  theme: {
    colors: {
      transparent: "transparent",
      current: "currentColor",
      inherit: "inherit",
      ...Object.fromEntries(colours.map((name) => [name, token(name)])),
    },
    fontFamily: { sans: [token("face")] },
    fontSize: {
      note: text("note"),
      small: text("small"),
      body: text("body"),
      lead: text("lead"),
      verdict: text("verdict"),
      title: text("title"),
    },
    fontWeight: { normal: token("w-text"), semibold: token("w-strong"), bold: token("w-title") },
    borderRadius: { none: "0", sheet: token("r-sheet"), press: token("r-press"), full: "9999px" },
    boxShadow: { none: "none", dialog: token("shadow-dialog"), focus: token("focus") },
    screens: { sm: "480px", md: "720px", lg: "1200px", xl: "1440px" },
    extend: {
      spacing: { margin: token("margin"), gutter: token("gutter"), row: token("row"), "row-home": token("row-home"), tap: token("tap") },
      maxWidth: { page: "1440px", measure: token("measure") },
      borderWidth: { hair: token("hair"), rule: token("rule"), double: token("double") },
      transitionDuration: { press: token("m-press"), fold: token("m-fold") },
      transitionTimingFunction: { fold: token("m-ease") },
    },
  },
} satisfies Config;
