#!/usr/bin/env node
import { errorText } from './error-text.js';
import { main } from './program.js';
import { processStreams } from './streams.js';

const streams = processStreams();
const status = await main(process.argv.slice(2), streams);
const lost = await streams.lost();
if (lost !== undefined) streams.stderr.write(`${errorText(lost)}\n`);
process.exitCode = lost === undefined || status !== 0 ? status : lost.exitCode;
