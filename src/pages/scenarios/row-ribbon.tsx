import type { ScenarioItem } from "#shared/api/scenarios.ts";
import type { RoundTiming } from "#shared/network/round.ts";
import { SmallRibbon } from "#src/components/drawings/small-ribbon.tsx";

/** The list carries what the picture draws, not what only the engine needs of the timing. */
export const RowRibbon = ({ item }: { item: ScenarioItem }) => <SmallRibbon timing={item.round as RoundTiming} />;
