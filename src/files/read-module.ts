import type { Module } from './module.js';
import { moduleSchema } from './module-schema.js';
import { parseFile } from './parse-file.js';
import { readAndParse, type FileRead } from './read-text.js';

/** @throws BadFileError */
export function parseModule(text: string, fileName: string): Module {
  return parseFile('module', moduleSchema, text, fileName);
}

/** @throws BadFileError, MissingFileError */
export function readModule(path: string): Promise<FileRead<Module>> {
  return readAndParse(path, parseModule);
}
