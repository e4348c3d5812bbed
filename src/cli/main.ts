#!/usr/bin/env node
import { main } from './program.js';
import { processStreams } from './streams.js';

process.exitCode = await main(process.argv.slice(2), processStreams());
