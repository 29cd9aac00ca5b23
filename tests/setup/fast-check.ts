import fc from "fast-check";

// The same examples in every run, so that a change is judged by the change; `npm run verify` draws new ones and prints their seed when one fails.
if (process.env.LONGREED_FULL !== "1") fc.configureGlobal({ ...fc.readConfigureGlobal(), seed: 20_260_504 });
