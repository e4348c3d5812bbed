#!/usr/bin/env node
import { errorText } from './error-text.js';
import { main } from './program.js';
import { say } from './say.js';
import { processStreams } from './streams.js';

const streams = processStreams();
const status = await main(process.argv.slice(2), streams);
const lost = await streams.lost();
if (lost !== undefined) say(streams.stderr, errorText(lost));
process.exitCode = lost === undefined || status !== 0 ? status : lost.exitCode;
