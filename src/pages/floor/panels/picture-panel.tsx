import { type FormEvent, useRef, useState } from "react";
import { MAX_PICTURE_BYTES, type Picture } from "#shared/api/pictures.ts";
import type { Floor } from "#shared/scenario/floor-schema.ts";
import { useDeletePicture } from "#src/api/pictures/delete-picture.ts";
import { usePictureList } from "#src/api/pictures/list-pictures.ts";
import { useUploadPicture } from "#src/api/pictures/upload-picture.ts";
import { useTeam } from "#src/app/session.tsx";
import type { Spot } from "#src/components/plan/plan-view.ts";
import { Button } from "#src/components/ui/button.tsx";
import { Field, type Problem, ProblemNote } from "#src/components/ui/field.tsx";
import { failureText } from "#src/components/ui/query-error.tsx";
import { Section } from "#src/components/ui/section.tsx";
import { useToast } from "#src/components/ui/toast.tsx";
import { bytesText, fixed, whenText, withUnit } from "#src/lib/format.ts";
import { setAt } from "#src/pages/scenario/model/json-path.ts";
import { siUnit, toStored } from "#src/pages/scenario/model/screen-unit.ts";
import { NumberAt } from "#src/pages/scenario/setup/fields.tsx";
import { useForm } from "#src/pages/scenario/setup/form.tsx";
import { rescaled } from "../model/picture-scale.ts";

const PATH = ["floor", "picture"] as const;
const METRES = siUnit("m");

interface PicturePanelProps {
  floor: Floor;
  mayUpload: boolean;
  missing: boolean;
  scaling: readonly Spot[] | null;
  onScaling: (points: readonly Spot[] | null) => void;
}

/** What is wrong with a file before it is sent. */
export function pictureProblem(file: Pick<File, "name" | "size" | "type">): string | null {
  if (file.size > MAX_PICTURE_BYTES)
    return `“${file.name}” has ${bytesText(file.size)}; at most ${bytesText(MAX_PICTURE_BYTES)} are taken. Save it smaller: 3000 pixels across are plenty for a plan.`;
  if (file.size === 0) return `“${file.name}” is empty.`;
  if (file.type !== "" && file.type !== "image/png" && file.type !== "image/jpeg")
    return `“${file.name}” is no PNG or JPEG picture. Plans in PDF or DXF have to be exported as a picture first.`;
  return null;
}

/** A picture of the hall under the plan: upload, scale, place, strength. */
export function PicturePanel({ floor, mayUpload, missing, scaling, onScaling }: PicturePanelProps) {
  const { draft, edit, readOnly } = useForm();
  const team = useTeam();
  const toast = useToast();
  const input = useRef<HTMLInputElement>(null);
  const upload = useUploadPicture(team.id);
  const list = usePictureList(team.id, mayUpload);
  const take = useDeletePicture(team.id);
  const [problem, setProblem] = useState<string | null>(null);
  const { picture } = floor;

  const lay = (chosen: Picture) => {
    const metresPerPixel = Number(Math.min(100, Math.max(1e-5, floor.widthM / chosen.widthPx)).toPrecision(6));
    edit({ kind: "put", json: setAt(draft.json, PATH, { id: chosen.id, xM: 0, yM: 0, metresPerPixel, opacity: 0.5 }), forget: [PATH] });
    onScaling([]);
  };
  const send = (file: File | undefined) => {
    if (!file) return;
    const wrong = pictureProblem(file);
    setProblem(wrong);
    if (wrong) return;
    upload.mutate(file, {
      onSuccess: ({ picture: kept, existed }) => {
        lay(kept);
        toast({
          text: existed ? "The team has this picture already; it lies under the plan now." : "The picture lies under the plan; set its scale next.",
        });
      },
      onError: (error) => setProblem(failureText(error)),
    });
  };
  const unused = list.data?.items.filter(({ id }) => id !== picture?.id) ?? [];
  return (
    <Section title="Floor picture" sum={picture ? `1 pixel is ${withUnit(fixed(picture.metresPerPixel * 1000, 1), "mm")}` : "none"} defaultOpen>
      {missing && (
        <ProblemNote
          problem={{
            title: "The picture cannot be fetched.",
            text: "It was deleted, or the server is out of reach. Remove it here or upload it again.",
          }}
        />
      )}
      {picture ? (
        <div className="nf">
          {scaling !== null && !readOnly ? (
            <ScaleForm points={scaling} floor={floor} onDone={() => onScaling(null)} onAgain={() => onScaling([])} />
          ) : (
            !readOnly && (
              <div className="fl-acts">
                <Button small onClick={() => onScaling([])}>
                  Set the scale by two points
                </Button>
              </div>
            )
          )}
          <NumberAt path={[...PATH, "xM"]} />
          <NumberAt path={[...PATH, "yM"]} />
          <NumberAt path={[...PATH, "metresPerPixel"]} />
          <NumberAt path={[...PATH, "opacity"]} hint="With the tool “Picture” in hand it can be dragged." />
          {!readOnly && (
            <div className="fl-acts">
              <Button small kind="back" onClick={() => edit({ kind: "put", json: setAt(draft.json, PATH, null), forget: [PATH] })}>
                Remove the picture
              </Button>
            </div>
          )}
        </div>
      ) : (
        <p className="note second pb-1">
          A drawing or photo of the hall, PNG or JPEG, at most {bytesText(MAX_PICTURE_BYTES)}. It is scaled by two points whose distance is known.
        </p>
      )}
      {!readOnly && mayUpload && (
        <>
          <input
            ref={input}
            type="file"
            accept="image/png,image/jpeg"
            hidden
            data-picture-file
            onChange={(event) => {
              send(event.target.files?.[0]);
              event.target.value = "";
            }}
          />
          <div className="fl-acts">
            <Button small icon="import" busy={upload.isPending} onClick={() => input.current?.click()}>
              {upload.isPending ? "Uploading" : picture ? "Upload another picture" : "Upload a picture"}
            </Button>
          </div>
          {problem && <ProblemNote problem={{ title: problem }} />}
          {unused.length > 0 && (
            <>
              <p className="sub3">Uploaded before</p>
              <ul className="fl-list">
                {unused.slice(0, 8).map((one) => (
                  <li key={one.id} className="fl-line spread">
                    <button type="button" onClick={() => lay(one)} title="Lay it under the plan">
                      <span className="strong">{one.name}</span>
                      <span className="second">
                        {one.widthPx} × {one.heightPx} pixels, {whenText(one.uploadedAt)}
                      </span>
                    </button>
                    {one.mayEdit && one.scenarios === 0 && (
                      <Button
                        small
                        kind="bare"
                        onClick={() => take.mutate(one.id, { onError: (error) => toast({ text: `Not deleted. ${failureText(error)}` }) })}
                      >
                        Delete
                      </Button>
                    )}
                  </li>
                ))}
              </ul>
            </>
          )}
        </>
      )}
      {!readOnly && !mayUpload && <p className="note second">Uploading pictures is for those who may save scenarios.</p>}
    </Section>
  );
}

/** Two points on the picture and their distance on the floor. */
function ScaleForm({ points, floor, onDone, onAgain }: { points: readonly Spot[]; floor: Floor; onDone: () => void; onAgain: () => void }) {
  const { draft, edit } = useForm();
  const [text, setText] = useState("");
  const [tried, setTried] = useState(false);
  const value = toStored(text, METRES);
  const problem: Problem | null =
    value === null
      ? { title: text.trim() === "" ? "The distance is empty." : `“${text.trim()}” is no number.`, text: "Enter 0.01 to 2000 m." }
      : value < 0.01 || value > 2000
        ? { title: `The distance is ${value} m: 0.01 to 2000 m is permitted.` }
        : null;
  const both = points.length === 2;
  const apply = (event: FormEvent) => {
    event.preventDefault();
    setTried(true);
    if (problem || value === null || !both || !floor.picture) return;
    const next = rescaled(floor.picture, points[0], points[1], value);
    if (!next.ok) return setTried(true);
    edit({ kind: "put", json: setAt(draft.json, PATH, next.picture), forget: [PATH] });
    onDone();
  };
  return (
    <form onSubmit={apply} noValidate>
      <p className="note second pb-1">
        {points.length === 0
          ? "Press the first of two points on the picture whose distance you know: two columns, both ends of a wall."
          : points.length === 1
            ? "Now press the second point."
            : "How far are they apart on the floor?"}
      </p>
      {both && <Field label="Distance" unit="m" range="0.01 to 2000" value={text} onText={setText} problem={tried ? problem : null} autoFocus />}
      <div className="fl-acts">
        {both && (
          <Button small type="submit">
            Scale the picture
          </Button>
        )}
        {points.length > 0 && (
          <Button small kind="bare" onClick={onAgain}>
            Other points
          </Button>
        )}
        <Button small kind="bare" onClick={onDone}>
          Leave the scale
        </Button>
      </div>
    </form>
  );
}
