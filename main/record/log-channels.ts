import { z } from 'zod';
import { missionEventSchema } from '../../shared-model/mission/event.ts';
import type { LogChannel } from './mcap-log.ts';
import { sampleMessageSchema } from './sample-coding.ts';

export const LOG_NAME = 'mission.mcap';
export const EVENTS_TOPIC = '/events';
export const READINGS_TOPIC = '/readings';

/** Indices into `LOG_CHANNELS`. */
export const EVENTS = 0;
export const READINGS = 1;

/** The channels of a mission's log, with the JSON Schemas of their messages. */
export const LOG_CHANNELS: readonly LogChannel[] = [
  {
    topic: EVENTS_TOPIC,
    schemaName: 'foldback.MissionEvent',
    jsonSchema: z.toJSONSchema(missionEventSchema),
  },
  {
    topic: READINGS_TOPIC,
    schemaName: 'foldback.Readings',
    jsonSchema: z.toJSONSchema(sampleMessageSchema),
  },
];
