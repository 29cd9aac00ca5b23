const password = "long words make good locks";

/** People, rigs, sensors and liquids. */
export const LABORATORY_EXAMPLES = {
  "POST /api/people": { "An operator": { email: "j.pellick@longreed.example", name: "J. Pellick", role: "operator", password } },
  "PATCH /api/people/{id}": { "Another role": { role: "researcher" } },
  "POST /api/invitations": { "A viewer": { email: "r.askelund@longreed.example", name: "R. Askelund", role: "viewer" } },
  "POST /api/invitations/accept": { "With the token of the link": { token: "lr_invite_2vNq8", name: "R. Askelund", password } },
  "POST /api/password-resets": { "A link by mail": { email: "j.pellick@longreed.example" } },
  "POST /api/password-resets/use": { "With the token of the link": { token: "lr_reset_9fKw1", password } },
  "PATCH /api/me": { "No mail of alarms": { notify: { alarms: false } } },
  "POST /api/me/password": { "A new one": { current: "the old long words", password } },
  "PATCH /api/laboratory": { "Name and clock": { name: "Harrowmere", timeZone: "Europe/Berlin" } },
  "POST /api/tokens": { "Only reading, for a while": { name: "plots on the office computer", scope: "read", expiresAt: "2027-05-14T00:00:00Z" } },
  "POST /api/rigs": { "With four ports": { name: "North bench", timeZone: "Europe/Berlin", ports: 4, wasteCapacityMl: 5000 } },
  "PATCH /api/rigs/{id}": { "A larger container": { wasteCapacityMl: 10000 } },
  "POST /api/rigs/{id}/tokens": { "For its computer": { name: "bench computer" } },
  "POST /api/rigs/{id}/take-over": { "With a reason": { why: "Changing the filter" } },
  "POST /api/rigs/{id}/give-back": { "With a note": { note: "Filter changed, line bled" } },
  "POST /api/rigs/{id}/loads": {
    "A new bottle": { port: 1, lotId: "7", volumeMl: 500, how: "replace" },
    "Another lot in mid-campaign": { port: 1, lotId: "9", volumeMl: 500, how: "replace", confirm: true },
  },
  "POST /api/rigs/{id}/blocked-times": { "A visit": { from: "2026-06-03T06:00:00Z", to: "2026-06-03T14:00:00Z", why: "Service of the thermostat" } },
  "POST /api/sensors": { "A vibrating wire": { serial: "WR-2204", kind: "wire", nominalF0Hz: 2400, nominalQ: 1800, radiusM: 0.00005 } },
  "PATCH /api/sensors/{id}": { "A note": { note: "Rewound in March" } },
  "POST /api/sensors/{id}/mounts": { Now: { rigId: "1" }, "As it was": { rigId: "1", position: 2, mountedAt: "2026-05-12T09:30:00Z", note: "New clamp" } },
  "POST /api/mounts/{id}/end": { Now: {}, "As it was": { endedAt: "2026-05-14T11:30:00Z", note: "For a look under the microscope" } },
  "POST /api/liquids": {
    Water: { name: "Water, degassed", model: "water" },
    "A flammable mixture": {
      name: "Ethanol 40 %",
      model: "ethanol-water",
      massFraction: 0.4,
      hazards: { ghs: ["H226", "H319"], flashPointC: 26, waste: "halogen-free solvents", notWith: ["Nitric acid"] },
    },
    "By a table": {
      name: "Brine",
      model: "table",
      table: [
        { temperatureC: 15, densityKgM3: 1148.2, viscosityMPaS: 1.98 },
        { temperatureC: 25, densityKgM3: 1143.6, viscosityMPaS: 1.54 },
      ],
    },
  },
  "PATCH /api/liquids/{id}": { "Another letter": { letter: "B" }, Retire: { retired: true } },
  "POST /api/liquids/{id}/lots": {
    "With its certificate": {
      code: "B-35",
      receivedAt: "2026-04-20T00:00:00Z",
      expiresAt: "2027-04-20T00:00:00Z",
      certificate: [{ temperatureC: 20, densityKgM3: 1145.93, uDensityKgM3: 0.05, viscosityMPaS: 1.742, uViscosityMPaS: 0.006 }],
    },
  },
  "PATCH /api/lots/{id}": { "No expiry": { expiresAt: null } },
};
