import { useState } from "react";
import type { NamedBand } from "#shared/network/channels.ts";
import { channelRange, wifiBands } from "#shared/network/channels.ts";
import type { Phy } from "#shared/scenario/round-schema.ts";
import { channelFactsText } from "#src/components/drawings/channel-facts.ts";
import { ChannelPlan } from "#src/components/drawings/channel-plan.tsx";
import { readChannels, toggleChannel } from "../model/channel-text.ts";
import { interfererName } from "../model/floor-words.ts";
import { getAt, setAt } from "../model/json-path.ts";
import { useForm } from "./form.tsx";
import { NumberListAt } from "./list-field.tsx";
import { floorOf } from "./node-fields.tsx";

const LIST = ["radio", "channels", "list"] as const;
const WIFI = wifiBands(20);
const WIFI_NUMBERS = WIFI.map((_, i) => i + 1);
const USUAL_WIFI = [1, 6, 11];

/** The radio's channels as a line of text and as a picture of the band; both change the same list. */
export function ChannelPart() {
  const { draft, edit, readOnly } = useForm();
  const [wifi, setWifi] = useState<readonly number[]>(USUAL_WIFI);
  const phy = getAt(draft.json, ["radio", "phy"]) as Phy;
  const list = (getAt(draft.json, LIST) as number[] | undefined) ?? [];
  const { first, last, usual } = channelRange(phy);
  const bands: NamedBand[] = [
    ...wifi.map((k) => ({ ...WIFI[k - 1], name: `Wi-Fi ${k}` })),
    ...(floorOf(draft.json)?.interferers ?? []).map((one, i) => ({
      name: interfererName(one, i),
      centreMHz: one.centreMHz,
      bandwidthMHz: one.bandwidthMHz,
    })),
  ];
  const toggle = (channel: number) => edit({ kind: "put", json: setAt(draft.json, LIST, toggleChannel(list, channel)), forget: [LIST] });
  return (
    <>
      <NumberListAt path={LIST} read={(text) => readChannels(text, phy)} empty={`${usual}, the last of ${first} to ${last}`} />
      <ChannelPlan phy={phy} list={list} bands={bands} onToggle={readOnly ? undefined : toggle} />
      <p className="note second pb-1">{channelFactsText(phy, list, bands)}</p>
      <fieldset className="su-wifi">
        <legend>Wi-Fi channels shown</legend>
        {WIFI_NUMBERS.map((k) => (
          <label key={k}>
            <input
              type="checkbox"
              checked={wifi.includes(k)}
              onChange={() =>
                setWifi((before) => (before.includes(k) ? before.filter((one) => one !== k) : [...before, k].sort((one, other) => one - other)))
              }
            />
            {k}
          </label>
        ))}
      </fieldset>
    </>
  );
}
