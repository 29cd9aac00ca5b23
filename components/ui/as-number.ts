/** For `register` of a number that is typed as text: nothing typed is nothing, a comma is a point, anything else is for the schema to refuse. */
export const asNumber = {
  setValueAs: (typed: unknown): unknown => {
    if (typeof typed !== "string") return typed;
    const text = typed.trim().replace("\u2212", "-").replace(",", ".");
    if (text === "") return undefined;
    return Number.isNaN(Number(text)) ? typed : Number(text);
  },
};

/** For `register` of text that may be left out. */
export const orNothing = { setValueAs: (typed: unknown): unknown => (typeof typed === "string" && typed.trim() === "" ? undefined : typed) };

/** For `register` of a date field: the beginning or the end of that day in UTC, as RFC 3339. */
export const asDay = (end: "begins" | "ends") => ({
  setValueAs: (typed: unknown): unknown =>
    typeof typed === "string" && /^\d{4}-\d{2}-\d{2}$/.test(typed) ? `${typed}T${end === "begins" ? "00:00:00" : "23:59:59"}Z` : typed === "" ? undefined : typed,
});

/** The same, with `null` for nothing: a change that empties a field. */
export const orNull = ({ setValueAs }: { setValueAs: (typed: unknown) => unknown }) => ({ setValueAs: (typed: unknown): unknown => setValueAs(typed) ?? null });
