import type { ReactNode } from "react";
import type { Floor } from "#shared/scenario/floor-schema.ts";
import { Section } from "#src/components/ui/section.tsx";
import { counted, fixed, significant, withUnit } from "#src/lib/format.ts";
import { activityText, interfererName, obstacleName } from "#src/pages/scenario/model/floor-words.ts";
import { NumberAt, TextAt } from "#src/pages/scenario/setup/fields.tsx";
import { type RoleAt, roleText } from "../model/floor-names.ts";
import type { Studio } from "../use-studio.ts";

interface OverviewProps {
  floor: Floor;
  roles: ReadonlyMap<number, readonly RoleAt[]>;
  studio: Studio;
}

/** What stands on the floor, to be chosen from lists as well as on the plan. */
export function OverviewPanel({ floor, roles, studio }: OverviewProps) {
  const { select } = studio;
  const { nodes, obstacles, interferers } = floor;
  return (
    <>
      <Section title={floor.name || "Floor"} sum={`${significant(floor.widthM, 4)} × ${withUnit(significant(floor.depthM, 4), "m")}`} defaultOpen>
        <div className="nf">
          <TextAt path={["floor", "name"]} />
          <NumberAt path={["floor", "widthM"]} />
          <NumberAt path={["floor", "depthM"]} />
        </div>
      </Section>
      <Section title="Nodes" sum={counted(nodes.length, "node")} defaultOpen={nodes.length <= 30}>
        {nodes.length === 0 ? (
          <p className="note second">None yet: take the tool “Node” and press where one stands.</p>
        ) : (
          <List>
            {nodes.map((node) => (
              <Row key={node.id} onPress={() => select({ kind: "node", id: node.id })} name={`${node.id}${node.name ? ` ${node.name}` : ""}`}>
                {roleText(roles.get(node.id))} · {fixed(node.xM, 1)}, {withUnit(fixed(node.yM, 1), "m")}
              </Row>
            ))}
          </List>
        )}
      </Section>
      {obstacles.length > 0 && (
        <Section title="Walls and blocks" sum={String(obstacles.length)} defaultOpen={obstacles.length <= 4}>
          <List>
            {obstacles.map((obstacle, i) => (
              // biome-ignore lint/suspicious/noArrayIndexKey: obstacles have no other name
              <Row key={i} onPress={() => select({ kind: "obstacle", index: i })} name={obstacleName(obstacle, i)}>
                {obstacle.type === "wall" && obstacle.name ? "wall, " : ""}
                {withUnit(significant(obstacle.lossDb, 3), "dB")}
              </Row>
            ))}
          </List>
        </Section>
      )}
      {interferers.length > 0 && (
        <Section title="Interferers" sum={String(interferers.length)} defaultOpen>
          <List>
            {interferers.map((one, i) => (
              // biome-ignore lint/suspicious/noArrayIndexKey: interferers have no other name
              <Row key={i} onPress={() => select({ kind: "interferer", index: i })} name={interfererName(one, i)}>
                {withUnit(significant(one.powerDbm, 3), "dBm")}, {activityText(one.activity)}
              </Row>
            ))}
          </List>
        </Section>
      )}
    </>
  );
}

const List = ({ children }: { children: ReactNode }) => <ul className="fl-list">{children}</ul>;
const Row = ({ name, onPress, children }: { name: string; onPress: () => void; children: ReactNode }) => (
  <li>
    <button type="button" onClick={onPress}>
      <span className="strong">{name}</span>
      <span className="second">{children}</span>
    </button>
  </li>
);
