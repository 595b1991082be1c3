import { TEMPLATES, type Template } from "#shared/scenario/templates.ts";
import { counted, msText, percentText } from "#src/lib/format.ts";
import { TemplatePicture } from "./template-picture.tsx";

/** What the template itself says: its round, its hops, its losses. */
function facts({ scenario }: Template): string {
  const { process } = scenario.losses;
  const lost = process.type === "bernoulli" ? `${percentText(process.measurement, 0)} lost` : null;
  return [`${msText(scenario.round.periodS)} round`, counted(scenario.round.hops, "hop"), lost].filter(Boolean).join(" · ");
}

interface TemplateStripProps {
  /** The template that is being made into a scenario. */
  making: Template["key"] | null;
  onMake: (template: Template) => void;
}

export function TemplateStrip({ making, onMake }: TemplateStripProps) {
  return (
    <section className="tpls" aria-labelledby="templates">
      <div className="lab">
        <h2 id="templates">New from a template</h2>
        <p>Each one runs at once.</p>
      </div>
      {TEMPLATES.map((template) => (
        <button
          key={template.key}
          type="button"
          className="tpl"
          aria-busy={making === template.key || undefined}
          onClick={() => making === null && onMake(template)}
        >
          <TemplatePicture template={template.key} />
          <span className="what">
            <span className="vh">New: </span>
            <b>{template.title}</b>
            <span>{making === template.key ? "Being made …" : template.text}</span>
            <span className="pl">{facts(template)}</span>
          </span>
        </button>
      ))}
    </section>
  );
}
