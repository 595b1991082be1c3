import type { ReactNode } from "react";
import type { PlanHandle } from "#src/components/plan/plan.tsx";
import { Button, IconButton } from "#src/components/ui/button.tsx";
import type { Tool } from "./use-studio.ts";

const icon = (path: ReactNode) => (
  <svg className="ic" width="16" height="16" viewBox="0 0 16 16" aria-hidden="true">
    {path}
  </svg>
);

const LIST: { tool: Tool; word: string; icon: ReactNode }[] = [
  { tool: "select", word: "Select", icon: icon(<path d="M3.4 2.2l8.8 4.9-3.8 1.1-1.5 3.9z" />) },
  {
    tool: "node",
    word: "Node",
    icon: icon(
      <>
        <circle cx="8" cy="9.4" r="2.2" />
        <path d="M3.7 7a5 5 0 0 1 8.6 0M1.6 4.8a8 8 0 0 1 12.8 0" />
      </>,
    ),
  },
  { tool: "wall", word: "Wall", icon: icon(<path d="M2 13.5V9.5h9V3.5M4.8 13.5V12h8.7V3.5" />) },
  { tool: "block", word: "Block", icon: icon(<path d="M2.5 4.5h11v7h-11zM2.5 8l3.5-3.5M6 11.5l7-7M9.5 11.5l4-4" />) },
  { tool: "interferer", word: "Interferer", icon: icon(<path d="M9 1.8L4.2 8.8h3.6L6.6 14.2 12 6.6H8.2z" />) },
  {
    tool: "way",
    word: "Way-points",
    icon: icon(
      <>
        <circle cx="3.4" cy="12.4" r="1.5" />
        <path d="M4.9 12.2c4.2-.5 1-6.6 5-7.6" strokeDasharray="2 1.8" />
        <path d="M9.8 2.6l3.6 1.6-2.8 2.6z" />
      </>,
    ),
  },
  {
    tool: "measure",
    word: "Measure",
    icon: icon(<path d="M1.8 11.2L11.2 1.8l3 3-9.4 9.4zM5 8l1.6 1.6M7.4 5.6l1.6 1.6M9.8 3.2l1.2 1.2" />),
  },
  { tool: "picture", word: "Picture", icon: icon(<path d="M2 3h12v10H2zM2 11l3.6-3.6 2.8 2.8 2-2L14 11" />) },
];

const LOOKING: readonly Tool[] = ["select", "measure"];

interface ToolsBarProps {
  tool: Tool;
  onTool: (tool: Tool) => void;
  readOnly: boolean;
  plan: React.RefObject<PlanHandle | null>;
  whole: boolean;
}

/** The tools of the plan, and its zoom. */
export function ToolsBar({ tool, onTool, readOnly, plan, whole }: ToolsBarProps) {
  return (
    <div className="fl-tools">
      <div className="fl-tool-row" role="toolbar" aria-label="Plan tools">
        {LIST.filter((one) => !readOnly || LOOKING.includes(one.tool)).map((one) => (
          <Button key={one.tool} kind="bare" aria-pressed={tool === one.tool} onClick={() => onTool(one.tool)}>
            {one.icon}
            {one.word}
          </Button>
        ))}
      </div>
      <div className="fl-zoom">
        <IconButton
          small
          icon="minus"
          label="Zoom out"
          iconSize={14}
          impossible={whole ? "The whole plan is seen." : null}
          onClick={() => plan.current?.zoomBy(1 / 1.5)}
        />
        <IconButton small icon="plus" label="Zoom in" iconSize={14} onClick={() => plan.current?.zoomBy(1.5)} />
        <Button small impossible={whole ? "The whole plan is seen." : null} onClick={() => plan.current?.whole()}>
          Whole plan
        </Button>
      </div>
    </div>
  );
}
