const sweep = { centre: "track", span: { halfWidths: 8 }, points: 201, dwell: { ringDowns: 5 }, driveV: 0.1 };

const definition = {
  name: "Three fills",
  readout: "velocity",
  blocks: [
    {
      id: "cycles",
      kind: "repeat",
      times: 3,
      blocks: [
        { id: "air", kind: "measure", medium: "air", role: "reference", repeats: 30, sweep },
        { id: "fill", kind: "fill", slot: "sample", volumeMl: 40, flowMlPerMin: 20 },
        { id: "liquid", kind: "measure", medium: "sample", role: "sample", repeats: 150, sweep },
        { id: "drain", kind: "drain" },
        { id: "dry", kind: "dry", seconds: 1800, flowMlPerMin: 500 },
      ],
    },
  ],
};

const campaign = { protocolVersionId: "12", sensorId: "3", rigId: "1", slots: { sample: { port: 1, lotId: "7" } } };

/** Protocols, campaigns, and what they ask of people. */
export const CAMPAIGN_EXAMPLES = {
  "POST /api/campaigns/{id}/fit-runs": { "With a level offset": { offsetSlope: false, why: "The offset of this cell has no slope" } },
  "POST /api/campaigns/{id}/exclusions": { "Two repeats after a knock": { phaseId: "41", indices: [17, 18], why: "Somebody leaned on the bench at 09:40" } },
  "POST /api/exclusions/{id}/take-back": { "After a second look": { why: "The knock was at the other bench" } },
  "POST /api/protocols": { "Three fills of one liquid": { definition } },
  "POST /api/protocols/drafts": { "A first thought": { draft: { name: "Ageing in brine", blocks: [] } } },
  "POST /api/protocols/estimate": { "On one rig": { definition, rigId: "1", sensorId: "3" } },
  "PATCH /api/protocols/{id}": { "Another name": { name: "Three fills, slowly" } },
  "POST /api/protocols/{id}/versions": { "The next version": { definition, note: "Longer drying", basedOn: 2 } },
  "POST /api/imports": {
    "Columns of our own names": { name: "WR-2204 in 2019", sensorId: "1" },
    "Columns of other names, in other units": {
      name: "WR-2204 in 2019",
      mapping: { Zeit: "takenAt", "f (kHz)": { field: "f0Hz", unit: "kHz" }, "T (K)": { field: "temperatureC", unit: "K" } },
      format: { delimiter: ";", decimal: ",", timeFormat: "dayFirst", timeZone: "Europe/Berlin" },
    },
  },
  "POST /api/campaigns": {
    "As soon as the rig is free": campaign,
    "From a date on, before others": { ...campaign, startAt: "2026-06-01T06:00:00Z", priority: 10, name: "Ageing of WR-2204" },
  },
  "POST /api/campaigns/check": { "Before it is made": campaign },
  "PATCH /api/campaigns/{id}": { "Another bottle": { slots: { sample: { port: 2, lotId: "9" } } } },
  "POST /api/campaigns/{id}/queue": { "Nothing to acknowledge": {}, "Cautions read": { acknowledgements: ["flammable:7"] } },
  "POST /api/campaigns/{id}/move": { "Before another": { before: "118" }, "To the end of the line": { before: null } },
  "POST /api/campaigns/{id}/hold": { "With a reason": { why: "Lid opened for a look" } },
  "POST /api/campaigns/{id}/resume": { "Where it stood": {}, "The phase again": { from: "phase" } },
  "POST /api/campaigns/{id}/stop": { "For good": { why: "The wire is bent" } },
  "POST /api/campaigns/{id}/set-aside": { "For a while": { why: "The rig is needed for a comparison" } },
  "POST /api/campaigns/{id}/amend": { "With a later version": { protocolVersionId: "13", why: "Drying was too short" } },
  "POST /api/campaigns/{id}/notes": { "For colleagues": { text: "The scatter of cycle 4 comes from the open lid." } },
  "POST /api/alarms/{id}/clear": { "Seen to": { note: "Port 1 refilled, line bled" } },
  "POST /api/alarms/{id}/shelve": { "Until the afternoon": { until: "2026-05-14T14:00:00Z", note: "Filter is being changed" }, "Bring it back": { until: null } },
  "POST /api/tasks/{id}/answer": { Done: { answer: "done" }, Cannot: { answer: "cannot", note: "No bottle of this lot is left" } },
};
