import type { Scenario } from "#shared/scenario/schema.ts";
import { Section } from "#src/components/ui/section.tsx";
import { useForm } from "#src/pages/scenario/setup/form.tsx";
import { LoopNodes, NodeAt } from "#src/pages/scenario/setup/node-fields.tsx";

/** On which nodes the loops run, who sends the other messages and the beacon: the same fields as in the set-up. */
export function RolesPanel({ defaultOpen = false, bad }: { defaultOpen?: boolean; bad: boolean }) {
  const { json } = useForm().draft;
  const { loops, round } = json as Scenario;
  const nodes = loops[0].nodes;
  const sum = nodes ? `sensor ${nodes.sensor}, controller ${nodes.controller}, actuator ${nodes.actuator}` : "not said";
  return (
    <Section title="Runs on" sum={bad ? "to put right" : sum} bad={bad} defaultOpen={defaultOpen}>
      <div className="nf">
        <p className="sub3">{loops[0].name}</p>
        <LoopNodes path={["loops", 0, "nodes"]} placement={loops[0].controller.placement} />
        {(round.otherLoops ?? []).map((loop, i) => (
          <div key={loop.id}>
            <p className="sub3">{loop.name}</p>
            <LoopNodes path={["round", "otherLoops", i, "nodes"]} placement={loop.placement} />
          </div>
        ))}
        {(round.messages ?? []).map((message, i) => (
          <NodeAt key={message.id} path={["round", "messages", i, "from"]} label={`${message.name}, sent by`} none="not said" />
        ))}
        {round.beacon && <NodeAt path={["floor", "beaconNode"]} label="Beacon sent by" none="the controller’s node" />}
      </div>
    </Section>
  );
}
