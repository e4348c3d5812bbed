export { didYouMean, nearest } from '../quantity/nearest.js';
