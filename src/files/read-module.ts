import type { Module } from './module.js';
import { moduleSchema } from './module-schema.js';
import { contentOf, openDocument } from './parse-file.js';
import { readAndParse, type FileRead } from './read-text.js';
import type { YamlDocument } from './yaml-document.js';

/** @throws BadFileError */
export function parseModule(text: string, fileName: string): Module {
  return moduleIn(openDocument('module', text, fileName));
}

/** @throws BadFileError */
export function moduleIn(document: YamlDocument): Module {
  return contentOf('module', moduleSchema, document);
}

/** @throws BadFileError, MissingFileError */
export function readModule(path: string): Promise<FileRead<Module>> {
  return readAndParse(path, parseModule);
}
