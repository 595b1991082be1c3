/** Which of a radio's channels are free, in words. */
import { channelPlan, channelRange, type NamedBand } from "#shared/network/channels.ts";
import type { Phy } from "#shared/scenario/round-schema.ts";
import { capital, listed, percentText } from "#src/lib/format.ts";

const runs = (numbers: readonly number[]): string[] => {
  const parts: string[] = [];
  for (let i = 0; i < numbers.length; ) {
    let end = i;
    while (numbers[end + 1] === numbers[end] + 1) end++;
    if (end - i >= 2) parts.push(`${numbers[i]} to ${numbers[end]}`);
    else for (let k = i; k <= end; k++) parts.push(String(numbers[k]));
    i = end + 1;
  }
  return parts;
};
const channelsText = (numbers: readonly number[]): string => `${numbers.length === 1 ? "channel" : "channels"} ${listed(runs(numbers))}`;

/** "Channels 15 and 20 are free; channel 17 is reached by Wi-Fi 6 (100 % of its width ...)". */
export function channelFactsText(phy: Phy, list: readonly number[], bands: readonly NamedBand[]): string {
  const used = list.length > 0 ? [...list].sort((a, b) => a - b) : [channelRange(phy).usual];
  const plan = channelPlan(phy, bands);
  const known = plan.filter(({ channel }) => used.includes(channel));
  const free = known.filter(({ overlaps }) => overlaps.length === 0).map(({ channel }) => channel);
  const hit = known.filter(({ overlaps }) => overlaps.length > 0);
  if (bands.length === 0) return `Used: ${channelsText(used)}. Nothing else is shown in the band.`;
  const by = new Map<string, number[]>();
  for (const { channel, overlaps } of hit) {
    const names = listed(overlaps.map(({ name, share }) => `${name} with ${percentText(share, share < 0.1 ? 1 : 0)} of its power`));
    by.set(names, [...(by.get(names) ?? []), channel]);
  }
  const parts = [
    ...(free.length > 0 ? [`${channelsText(free)} ${free.length === 1 ? "is" : "are"} clear of what is shown`] : []),
    ...[...by].map(([names, channels]) => `${channelsText(channels)}: ${names}`),
  ];
  return `${capital(parts.join("; "))}.`;
}
