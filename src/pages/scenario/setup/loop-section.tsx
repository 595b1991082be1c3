import type { RoundTiming } from "#shared/network/round.ts";
import {
  describeActuator,
  describeEstimator,
  describeIntegral,
  describeLoop,
  describePlacement,
  describeSensor,
  describeSilence,
  describeTiming,
} from "../model/describe.ts";
import { getAt } from "../model/json-path.ts";
import { ActuatorPart, OnLossFields, SilenceFields } from "./actuator-part.tsx";
import { EstimatorFields, IntegralFields, LawFields, PlacementFields } from "./controller-part.tsx";
import { useForm } from "./form.tsx";
import { Part } from "./part.tsx";
import { SensorPart } from "./sensor-part.tsx";
import { SetupSection } from "./setup-section.tsx";
import { TimingPart } from "./timing-part.tsx";

const at = (key: string) => `loops[0].${key}`;
const PLACEMENT = ["placement", "computeS", "acknowledgement", "limits"].map((key) => at(`controller.${key}`));
const ACTUATOR = ["inputs", "lagS", "deadTimeS", "busTransferS", "copies"].map((key) => at(`actuator.${key}`));

/** One plant with its sensor, controller and actuator: what is set most often first, the rest in parts that fold. */
export function LoopSection({ timing }: { timing: RoundTiming | null }) {
  const { json } = useForm().draft;
  const hasModel = getAt(json, ["loops", 0, "controller", "law", "type"]) !== "pid";
  return (
    <SetupSection id="loop" title="Loop" sum={describeLoop(json)}>
      <LawFields />
      <OnLossFields />
      {hasModel && (
        <>
          <Part title="Integral action" sum={describeIntegral(json)} owns={[at("controller.law.integral")]}>
            <IntegralFields />
          </Part>
          <Part title="Estimator" sum={describeEstimator(json)} owns={[at("controller.estimator")]}>
            <EstimatorFields />
          </Part>
        </>
      )}
      <Part title="Placement" sum={describePlacement(json)} owns={PLACEMENT}>
        <PlacementFields />
      </Part>
      <Part title="Sensor" sum={describeSensor(json)} owns={[at("sensor")]}>
        <SensorPart />
      </Part>
      <Part title="Actuator" sum={describeActuator(json)} owns={ACTUATOR}>
        <ActuatorPart />
      </Part>
      <Part title="Silence" sum={describeSilence(json)} owns={[at("actuator.silence")]}>
        <SilenceFields />
      </Part>
      <Part title="Timing" sum={describeTiming(timing?.loops[0] ?? null)} owns={[at("timing")]}>
        <TimingPart timing={timing} />
      </Part>
    </SetupSection>
  );
}
