import { matrix } from './matrix.js';

matrix('pty');
