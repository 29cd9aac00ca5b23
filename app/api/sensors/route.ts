import { route } from "@/lib/http/route";
import { created } from "@/lib/schema";
import { createSensor } from "@/lib/sensors/create";
import { findSensors } from "@/lib/sensors/read";
import { sensorBody, sensorPage, sensorQuery } from "@/lib/sensors/schema";

export const GET = route({
  permission: "read",
  summary: "Sensors by serial number, with where each is mounted",
  query: sensorQuery,
  answer: sensorPage,
  handle: ({ query }) => findSensors(query),
});

export const POST = route({
  permission: "edit sensors",
  summary: "Record a new sensor",
  body: sensorBody,
  answer: created,
  status: 201,
  handle: ({ person, body, now }) => createSensor({ by: person, now, ...body }),
});
