import { matrix } from './matrix.js';

matrix('tcp');
