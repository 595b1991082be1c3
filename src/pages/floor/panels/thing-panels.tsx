import { wifiBands } from "#shared/network/channels.ts";
import type { Floor } from "#shared/scenario/floor-schema.ts";
import { Button } from "#src/components/ui/button.tsx";
import { PickField } from "#src/components/ui/choice.tsx";
import { Section } from "#src/components/ui/section.tsx";
import { percentText, significant, withUnit } from "#src/lib/format.ts";
import { activityText, interfererName, obstacleName } from "#src/pages/scenario/model/floor-words.ts";
import { setAt } from "#src/pages/scenario/model/json-path.ts";
import { ChoiceAt, NumberAt, TextAt } from "#src/pages/scenario/setup/fields.tsx";
import { useForm } from "#src/pages/scenario/setup/form.tsx";
import { duplicateObstacle, INTERFERERS, OBSTACLES } from "../model/floor-edits.ts";
import type { Studio } from "../use-studio.ts";

interface ThingProps {
  floor: Floor;
  index: number;
  studio: Studio;
  onRemove: () => void;
}

const upTo = (most: number): string => `0 to ${significant(most, 4)}`;

export function ObstaclePanel({ floor, index, studio, onRemove }: ThingProps) {
  const { draft, edit, readOnly } = useForm();
  const obstacle = floor.obstacles[index];
  const path = [...OBSTACLES, index];
  const wall = obstacle.type === "wall";
  const length = wall ? Math.hypot(obstacle.toXM - obstacle.fromXM, obstacle.toYM - obstacle.fromYM) : 0;
  const copy = () => {
    edit(duplicateObstacle(draft.json, index));
    studio.select({ kind: "obstacle", index: index + 1 });
  };
  return (
    <Section title={obstacleName(obstacle, index)} sum={wall ? `wall, ${withUnit(significant(length, 3), "m")} long` : "block"} defaultOpen>
      <div className="nf">
        <TextAt path={[...path, "name"]} />
        <NumberAt
          path={[...path, "lossDb"]}
          hint={
            wall
              ? "Plasterboard about 3, brick about 6, concrete 10 to 20 dB: measure where it matters."
              : "A full rack of metal parts: 4 to 12 dB. Links that end inside count as crossing it."
          }
        />
        {wall ? (
          <>
            <NumberAt path={[...path, "fromXM"]} range={upTo(floor.widthM)} />
            <NumberAt path={[...path, "fromYM"]} range={upTo(floor.depthM)} />
            <NumberAt path={[...path, "toXM"]} range={upTo(floor.widthM)} />
            <NumberAt path={[...path, "toYM"]} range={upTo(floor.depthM)} />
          </>
        ) : (
          <>
            <NumberAt path={[...path, "xM"]} range={upTo(floor.widthM)} />
            <NumberAt path={[...path, "yM"]} range={upTo(floor.depthM)} />
            <NumberAt path={[...path, "widthM"]} />
            <NumberAt path={[...path, "depthM"]} />
          </>
        )}
      </div>
      {!readOnly && (
        <div className="fl-acts">
          <Button small impossible={floor.obstacles.length >= 500 ? "At most 500." : null} onClick={copy}>
            Duplicate
          </Button>
          <Button small kind="back" onClick={onRemove}>
            Remove {wall ? "this wall" : "this block"}
          </Button>
        </div>
      )}
    </Section>
  );
}

const WIFI = [...wifiBands(20), ...wifiBands(40)];
const OWN = "own";
const bandKey = ({ centreMHz, bandwidthMHz }: { centreMHz: number; bandwidthMHz: number }) => `${centreMHz} ${bandwidthMHz}`;

const ACTIVITY = [
  { value: "always", word: "always" },
  { value: "periodic", word: "by the clock" },
  { value: "random", word: "at random" },
];

export function InterfererPanel({ floor, index, onRemove }: ThingProps) {
  const { draft, edit, readOnly } = useForm();
  const one = floor.interferers[index];
  const path = [...INTERFERERS, index];
  const present = WIFI.find((band) => bandKey(band) === bandKey(one));
  const choose = (key: string) => {
    const band = WIFI.find((candidate) => bandKey(candidate) === key);
    if (!band) return;
    const named = one.name === "" || WIFI.some(({ name }) => name === one.name);
    const next = { ...one, centreMHz: band.centreMHz, bandwidthMHz: band.bandwidthMHz, name: named ? band.name : one.name };
    edit({
      kind: "put",
      json: setAt(draft.json, path, next),
      forget: [
        [...path, "centreMHz"],
        [...path, "bandwidthMHz"],
        [...path, "name"],
      ],
    });
  };
  const share = one.activity.type === "periodic" ? one.activity.onS / (one.activity.onS + one.activity.offS) : null;
  return (
    <Section title={interfererName(one, index)} sum={`interferer, ${activityText(one.activity)}`} defaultOpen>
      <div className="nf">
        <TextAt path={[...path, "name"]} />
        <PickField
          label="Band of"
          options={[{ value: OWN, word: "its own" }, ...WIFI.map((band) => ({ value: bandKey(band), word: band.name }))]}
          value={present ? bandKey(present) : OWN}
          onChoose={choose}
          disabled={readOnly}
        />
        <NumberAt path={[...path, "centreMHz"]} />
        <NumberAt path={[...path, "bandwidthMHz"]} />
        <NumberAt path={[...path, "powerDbm"]} />
        <NumberAt path={[...path, "xM"]} range={upTo(floor.widthM)} />
        <NumberAt path={[...path, "yM"]} range={upTo(floor.depthM)} />
        <NumberAt path={[...path, "heightM"]} />
        <ChoiceAt path={[...path, "activity"]} options={ACTIVITY} form />
        {one.activity.type === "periodic" && (
          <>
            <NumberAt path={[...path, "activity", "onS"]} />
            <NumberAt path={[...path, "activity", "offS"]} hint={share === null ? undefined : `On for ${percentText(share)} of the time.`} />
            <NumberAt path={[...path, "activity", "phaseS"]} />
          </>
        )}
        {one.activity.type === "random" && (
          <>
            <NumberAt path={[...path, "activity", "onShare"]} />
            <NumberAt path={[...path, "activity", "meanOnS"]} hint="On and off for exponentially distributed times." />
          </>
        )}
        <NumberAt path={[...path, "fromS"]} />
        <NumberAt path={[...path, "untilS"]} empty="the end" />
      </div>
      {!readOnly && (
        <div className="fl-acts">
          <Button small kind="back" onClick={onRemove}>
            Remove this interferer
          </Button>
        </div>
      )}
    </Section>
  );
}
