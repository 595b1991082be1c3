/** Reception logs: kept beside the docstrings of shared/reception and shared/math/statistics.ts. */
import type { MethodGroup } from "./methods.ts";

export const RECEPTION_METHODS: readonly MethodGroup[] = [
  {
    id: "reception",
    title: "Reception logs",
    methods: [
      {
        title: "Loss ratio",
        text: "Of $n$ packets $k$ were lost. The exact interval, and the score interval with $z$ = 1.96 for 95 %. Where losses come in bursts of memory $m$, $n$ packets are worth fewer independent ones, and the score interval is given for so many.",
        formulas: [
          "exact: B(α/2; k, n - k + 1) to B(1 - α/2; k + 1, n - k)",
          "score: (p + z^2 / 2n ± z sqrt(p (1 - p) / n + z^2 / 4n^2)) / (1 + z^2 / n)",
          "n_{independent} = n (1 - m) / (1 + m)",
        ],
        source:
          "Clopper and Pearson, Biometrika 26, 1934; Wilson, J. Am. Stat. Assoc. 22, 1927; choice: Brown, Cai and DasGupta, Stat. Sci. 16(2), 2001",
      },
      {
        title: "Gilbert-Elliott by maximum likelihood",
        text: "A packet is lost exactly when the channel is bad, so the states are seen; $n_{ij}$ counts the moves from $i$ to $j$, 1 is lost. The ratio of its likelihood to that of independent losses is tested with one degree of freedom.",
        formulas: [
          "g = n_{01} / (n_{00} + n_{01})",
          "b = n_{10} / (n_{10} + n_{11})",
          "mean burst = 1 / b, mean gap = 1 / g",
          "correlation over k packets = (1 - g - b)^k",
        ],
        source: "Gilbert, Bell Syst. Tech. J. 39, 1960; Anderson and Goodman, Ann. Math. Stat. 28, 1957; Billingsley, 1961",
      },
      {
        title: "Runs test",
        text: "$R$ runs of $n_1$ lost and $n_2$ delivered packets. Below 20 losses, and where losses are rare, the exact distribution counts; below 10 losses the answer is that they are too few to tell, with the length of bursts that would have shown.",
        formulas: [
          "mean = 2 n_1 n_2 / n + 1",
          "variance = 2 n_1 n_2 (2 n_1 n_2 - n) / (n^2 (n - 1))",
          "P(R = 2k) = 2 C(n_1 - 1, k - 1) C(n_2 - 1, k - 1) / C(n, n_1)",
        ],
        source: "Wald and Wolfowitz, Ann. Math. Stat. 11, 1940; NIST/SEMATECH e-Handbook 1.3.5.13",
      },
      {
        title: "Autocorrelation",
        text: "Over ten packets, with the full series’ mean; $Q$ is tested as chi-square with ten degrees of freedom.",
        formulas: ["Q = n (n + 2) Σ_{k=1}^{h} ρ_k^2 / (n - k)"],
        source: "Ljung and Box, Biometrika 65(2), 1978",
      },
      {
        title: "Successive outcomes",
        text: "Pearson’s chi-square on the table of lost and delivered after lost and delivered, one degree of freedom. Of three looks at the same losses each has to be three times as sure.",
        source: "Pearson, Philos. Mag. 50, 1900; Bonferroni’s inequality",
      },
      {
        title: "How long to measure",
        text: "The fewest packets that show a reliability $R$ with confidence $C$ when $c$ of them may be lost; for independent losses.",
        formulas: ["without a loss: n = ⌈ln(1 - C) / ln R⌉", "else the smallest n with P(at most c of n lost) ≤ 1 - C"],
        source: "Success run; exact binomial test",
      },
    ],
  },
];
