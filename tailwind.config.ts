import type { Config } from "tailwindcss";

const named = (names: readonly string[]) => Object.fromEntries(names.map((name) => [name, `var(--${name})`]));

const colors = named([
  "paper", "sheet", "sunk", "rule", "rule2", "rule3", "grid", "ink", "ink2", "ink3", "onink",
  "air", "fill", "liq1", "liq2", "liq3", "onliq1", "onliq2", "onliq3", "liq1-line", "liq2-line", "liq3-line",
  "clean", "clean-bg", "dry", "dry-bg", "alarm", "alarm-fill", "onalarm", "alarm-wash",
  "band", "band2", "weekend", "c2", "c3", "c4",
]);

const config: Config = {
  content: ["./app/**/*.{ts,tsx}", "./components/**/*.{ts,tsx}"],
  theme: {
    extend: {
      colors,
      fontFamily: { sans: "var(--sans)", serif: "var(--serif)" },
      fontSize: Object.fromEntries([1, 2, 3, 4, 5, 6, 7, 8].map((n) => [`t${n}`, [`var(--t${n})`, `var(--l${n})`]])),
      spacing: named(["s1", "s2", "s3", "s4", "s5", "s6", "s7", "s8", "pad", "margin", "gut", "side", "row", "touch"]),
      borderRadius: named(["r1", "r2", "r3"]),
      boxShadow: { sheet: "var(--shadow)" },
      screens: { phone: { max: "720px" }, narrow: { max: "1080px" }, snug: { max: "1240px" } },
    },
  },
};

export default config;
