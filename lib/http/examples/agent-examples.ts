/** What a rig agent sends, call by call. */
const about = { takenAt: "2026-05-14T06:18:04.250Z", temperatureC: 20.013 };

export const AGENT_EXAMPLES = {
  "POST /api/agent/hello": {
    "After a start": {
      agent: { name: "bench-agent", version: "2.3.0", instance: "north-1" },
      clock: "2026-05-14T06:00:00Z",
      abilities: {
        minHz: 100,
        maxHz: 100000,
        maxPoints: 401,
        maxDriveV: 1,
        minTemperatureC: 10,
        maxTemperatureC: 60,
        ports: 4,
        kinds: ["measure", "fill", "drain", "rinse", "dry", "settle"],
        repeatable: ["drain"],
      },
    },
  },
  "POST /api/agent/heartbeat": {
    Idle: { clock: "2026-05-14T06:10:00Z", state: "idle", temperatureC: 20.01, wasteMl: 640 },
    "In the middle of a fill": { clock: "2026-05-14T06:11:00Z", state: "working", stepId: "4711", lease: "k3Vh2c0b", done: { volumeMl: 18.5 }, ports: [{ port: 1, volumeMl: 431.5 }] },
  },
  "POST /api/agent/steps/next": { "A long poll": { waitS: 25, clock: "2026-05-14T06:12:00Z" } },
  "POST /api/agent/steps/{id}/readings": {
    "A complex sweep": {
      lease: "k3Vh2c0b",
      readings: [
        {
          index: 0,
          ...about,
          durationS: 42.5,
          sweep: {
            startHz: 2396,
            stopHz: 2404,
            re: [0.00024, 0.00036, 0.000595, 0.001149, 0.002873, 0.008767, 0.005951, 0.001962, 0.000878, 0.000487, 0.000307],
            im: [0.00153, 0.001862, 0.002365, 0.003189, 0.004525, 0.003288, -0.004909, -0.003971, -0.00283, -0.002151, -0.001725],
          },
        },
      ],
    },
    "A sweep of magnitudes at given frequencies": {
      lease: "k3Vh2c0b",
      readings: [
        {
          index: 1,
          ...about,
          frequencyHz: [2396.0, 2396.8, 2397.6, 2398.4, 2399.2, 2400.0, 2400.8, 2401.6, 2402.4, 2403.2, 2404.0],
          magnitude: [0.001549, 0.001896, 0.002439, 0.00339, 0.00536, 0.009363, 0.007714, 0.004429, 0.002963, 0.002205, 0.001752],
        },
      ],
    },
    "A ring-down": {
      lease: "k3Vh2c0b",
      readings: [{ index: 2, ...about, ringDown: { sampleHz: 19200, startS: 0.002, volts: [0.02, 0.01379, 0.0, -0.01312, -0.0181, -0.01248, -0.0, 0.01187, 0.01637, 0.01129, 0.0, -0.01074, -0.01482, -0.01022, -0.0, 0.00972] } }],
    },
    "Fitted by the rig": {
      lease: "k3Vh2c0b",
      readings: [{ index: 3, ...about, fitted: { f0Hz: 2400.251, q: 1800.4, f0StdHz: 0.0008, qStd: 0.6, amplitudeV: 0.00999 } }],
    },
  },
  "POST /api/agent/steps/{id}/finish": {
    Done: { lease: "k3Vh2c0b", outcome: "done" },
    "Broken off as wished": { lease: "k3Vh2c0b", outcome: "interrupted" },
    "The bottle is empty": { lease: "k3Vh2c0b", outcome: "failed", failure: { code: "port-empty", message: "port 1 drew air after 18.5 mL", retry: false } },
  },
};
