import type { LinkFit } from "#shared/reception/fit.ts";
import type { IndependenceTest } from "#shared/reception/independence.ts";
import { countText } from "#shared/reception/words.ts";
import { Scroller } from "#src/components/ui/table.tsx";
import { fixed, significant } from "#src/lib/format.ts";

interface Row {
  name: string;
  sees: string;
  found: string;
  p: number | null;
}

const pText = (p: number): string => (p < 1e-6 ? "below 0.000001" : p < 1e-3 ? fixed(p, 6) : significant(p, 2));

function rowsOf({ runs, ljungBox, transitions }: IndependenceTest, { gilbertElliott }: LinkFit): Row[] {
  const rows: Row[] = [];
  if (runs) {
    rows.push({
      name: "Runs test (Wald-Wolfowitz)",
      sees: "bursts, or losses that keep apart",
      found: `${countText(runs.observed)} runs, ${significant(runs.expected, 4)} expected; ${runs.method === "exact" ? "exact distribution" : `z = ${fixed(runs.z, 2)}`}`,
      p: runs.p,
    });
  }
  if (transitions) {
    const { table, chiSquare, smallestExpected, p } = transitions;
    const [[, lostAfterDelivered], [, lostAfterLost]] = table;
    const counted = smallestExpected >= 5;
    rows.push({
      name: "Successive packets (2 × 2, chi-square)",
      sees: "memory of one packet",
      found: `lost after a loss ${countText(lostAfterLost)} times, after a delivery ${countText(lostAfterDelivered)}; ${counted ? `χ² = ${significant(chiSquare)}` : "too few to count"}`,
      p: counted ? p : null,
    });
  }
  if (ljungBox) {
    rows.push({ name: "Ljung-Box", sees: `rhythms over ${ljungBox.lags} packets`, found: `Q = ${significant(ljungBox.q)}`, p: ljungBox.p });
  }
  if (gilbertElliott) {
    rows.push({
      name: "Likelihood ratio",
      sees: "Gilbert-Elliott against independent losses",
      found: `log-likelihood ${fixed(gilbertElliott.logLikelihood, 1)} against ${fixed(gilbertElliott.logLikelihoodIndependent, 1)}; ratio ${significant(gilbertElliott.likelihoodRatio)}`,
      p: gilbertElliott.pValue,
    });
  }
  return rows;
}

/** The figures behind the verdict. */
export function TestTable({ test, fit }: { test: IndependenceTest; fit: LinkFit }) {
  const rows = rowsOf(test, fit);
  if (rows.length === 0) return null;
  return (
    <section aria-labelledby="lg-tests" className="lg-tests">
      <div className="hrow">
        <h2 id="lg-tests">Are losses independent of each other?</h2>
        <span className="rt">verdict at {significant(test.significance * 100)} % false alarms over the first three together</span>
      </div>
      <Scroller label="Tests of independence">
        <table className="t num">
          <thead>
            <tr>
              <th scope="col">Test</th>
              <th scope="col">Sees</th>
              <th scope="col">Found</th>
              <th scope="col" className="r">
                p
              </th>
            </tr>
          </thead>
          <tbody>
            {rows.map(({ name, sees, found, p }) => (
              <tr key={name}>
                <th scope="row">{name}</th>
                <td>{sees}</td>
                <td>{found}</td>
                <td className="r nw">{p === null ? "not counted" : pText(p)}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </Scroller>
    </section>
  );
}
