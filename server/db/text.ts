/** Texts as they are searched and sorted: the same in every database, whatever collation it was made with. */

const plain = (text: string) => text.normalize("NFKD").replace(/\p{M}/gu, "").toLowerCase();

export const searchText = (...parts: string[]): string => parts.map(plain).join("\n");

export const searchWords = (search: string): string[] => plain(search).split(/\s+/).filter(Boolean);

/** "Rig 2" comes before "Rig 10". */
export const sortKey = (name: string): string => plain(name).replace(/\d+/g, (digits) => digits.padStart(12, "0"));
