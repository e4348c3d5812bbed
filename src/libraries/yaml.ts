/** What is used of yaml, which the build puts into one file (`join-libraries.js`): opening seventy takes time. */
export {
  isAlias,
  isCollection,
  isMap,
  isNode,
  isPair,
  isScalar,
  isSeq,
  LineCounter,
  parseDocument,
  Scalar,
  visit,
} from 'yaml';
export type { Document, Node, Pair, YAMLMap, YAMLSeq } from 'yaml';
