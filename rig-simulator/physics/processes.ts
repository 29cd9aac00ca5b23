/** Names of the random processes, so that no two share numbers. The order is part of every seed's meaning: append only. */
export const processes = {
  sweep: 1,
  f0White: 2,
  qWhite: 3,
  f0Flicker: 4,
  qFlicker: 5,
  f0Walk: 6,
  bathWander: 7,
  thermometer: 8,
  weather: 9,
  humidity: 10,
  fill: 11,
  network: 12,
} as const;
