import type { RoundTiming } from "#shared/network/round.ts";
import { describeActuator, describeController, describeLoop, describeSensor, describeTiming } from "../model/describe.ts";
import { ActuatorPart } from "./actuator-part.tsx";
import { ControllerPart } from "./controller-part.tsx";
import { Fold } from "./fold.tsx";
import { useForm } from "./form.tsx";
import { SensorPart } from "./sensor-part.tsx";
import { SetupSection, sumOrIssues, useIssuesIn } from "./setup-section.tsx";
import { TimingPart } from "./timing-part.tsx";

/** One plant with its sensor, controller and actuator. */
export function LoopSection({ timing }: { timing: RoundTiming | null }) {
  const { draft } = useForm();
  const { json } = draft;
  const controller = useIssuesIn("loops[0].controller");
  const actuator = useIssuesIn("loops[0].actuator");
  const sensor = useIssuesIn("loops[0].sensor");
  const instants = useIssuesIn("loops[0].timing");
  return (
    <SetupSection id="loop" title="Loop" sum={describeLoop(json)}>
      <Fold title="Controller" sum={sumOrIssues(controller, describeController(json))} bad={controller > 0} defaultOpen>
        <ControllerPart />
      </Fold>
      <Fold title="Actuator" sum={sumOrIssues(actuator, describeActuator(json))} bad={actuator > 0} defaultOpen>
        <ActuatorPart />
      </Fold>
      <Fold title="Sensor" sum={sumOrIssues(sensor, describeSensor(json))} bad={sensor > 0}>
        <SensorPart />
      </Fold>
      <Fold title="Timing" sum={sumOrIssues(instants, describeTiming(timing?.latencyS ?? null))} bad={instants > 0}>
        <TimingPart timing={timing} />
      </Fold>
    </SetupSection>
  );
}
