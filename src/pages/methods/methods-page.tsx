import { ENGINE_VERSION } from "#shared/simulation/version.ts";
import { DocumentTitle } from "#src/app/document-title.tsx";
import { Formula, Prose } from "./formula.tsx";
import { METHODS } from "./methods.ts";

/** Every formula that the engine uses, with its published source, for whoever has to put a name under a result. */
export function MethodsPage() {
  return (
    <>
      <DocumentTitle>Methods</DocumentTitle>
      <div className="title">
        <div>
          <h1>
            Methods <span className="rev">engine {ENGINE_VERSION}</span>
          </h1>
          <p className="sub prose">
            What is computed, formula by formula, and where it was published. What names no source is a definition of our own. A prime on a signal is
            its rate of change; on a matrix, its transpose.
          </p>
        </div>
      </div>
      <nav className="flex flex-wrap gap-x-6 gap-y-2 border-t-rule border-t-ink py-2" aria-label="Parts of this page">
        {METHODS.map(({ id, title }) => (
          <a key={id} href={`#${id}`}>
            {title}
          </a>
        ))}
      </nav>
      {METHODS.map(({ id, title, methods }) => (
        <section
          key={id}
          aria-labelledby={id}
          className="mt-6 grid gap-x-8 border-t-rule border-t-ink pt-3 min-[900px]:grid-cols-[180px_minmax(0,1fr)]"
        >
          <h2 className="h2 mb-2" id={id}>
            {title}
          </h2>
          <div>
            {methods.map((method) => (
              <article
                key={method.title}
                className="grid gap-x-10 gap-y-1 border-b border-line py-3 first:pt-0 last:border-b-0 min-[1100px]:grid-cols-2"
              >
                <div>
                  <h3 className="strong">{method.title}</h3>
                  <p className="second prose">
                    <Prose>{method.text}</Prose>
                  </p>
                  {method.source && <p className="note second mt-1">{method.source}</p>}
                </div>
                {method.formulas && (
                  <ul className="grid content-start gap-1.5 pt-1 text-lead">
                    {method.formulas.map((formula) => (
                      <li key={formula} className="wrap-anywhere">
                        <Formula>{formula}</Formula>
                      </li>
                    ))}
                  </ul>
                )}
              </article>
            ))}
          </div>
        </section>
      ))}
    </>
  );
}
