import type { FaultName } from './faults.js';
import type { Moment } from './moments.js';

/** What a run comes to when a fault strikes. */
export interface Promised {
  /** The exit status; with 0 the run completes, and every point that it was to take is in its record. */
  readonly status: 0 | 3 | 69 | 74;
  /**
   * How the load is left. `read back`: off, and the last words say so. `by hand`: nobody could read it back,
   * so the last words are what to do by hand. Where it still hears us, it is off all the same.
   */
  readonly load: 'read back' | 'by hand, and off' | 'by hand';
}

/** One row of the table: what must be said, and what the run comes to at each moment. */
export type Row = Readonly<Record<Moment, Promised>> & {
  /** Names the fault, on stderr. */
  readonly says: RegExp;
  /** Where other words are due at one moment. */
  readonly saysAt?: Partial<Readonly<Record<Moment, RegExp>>>;
};

const completes: Promised = { status: 0, load: 'read back' };
/** By Ctrl-C, which is how the make-safe is brought about while the load is on: the first reason wins. */
const stopped: Promised = { status: 3, load: 'read back' };
const stoppedMute: Promised = { status: 3, load: 'by hand, and off' };
const stoppedAlone: Promised = { status: 3, load: 'by hand' };
const guarded: Promised = { status: 3, load: 'read back' };
const refused: Promised = { status: 69, load: 'read back' };
const mute: Promised = { status: 69, load: 'by hand, and off' };
const alone: Promised = { status: 69, load: 'by hand' };
const diskFull: Promised = { status: 74, load: 'read back' };

const byCtrlC = /stopped with Ctrl-C/;

/**
 * The promise, at a glance: a single late, missing or garbled answer and a connection that comes back are
 * bridged; what persists ends the run with 69; what guards see ends it with 3; a full disk with 74. Nothing
 * here is taken from what the program says of itself.
 */
// prettier-ignore
export const promises: Readonly<Record<FaultName, Row>> = {
  dropped:         { 'pre-flight': completes, ramp: completes, search: completes, soak: completes, 'make-safe': stopped,      says: /LOAD: connection lost/, saysAt: { 'make-safe': byCtrlC } },
  gone:            { 'pre-flight': alone,     ramp: alone,     search: alone,     soak: alone,     'make-safe': stoppedAlone, says: /LOAD: (connection lost|the connection is refused|there is no port)/ },
  stolen:          { 'pre-flight': alone,     ramp: alone,     search: alone,     soak: alone,     'make-safe': stoppedAlone, says: /LOAD: (connection lost|another program has this port open)/ },
  silent:          { 'pre-flight': mute,      ramp: mute,      search: mute,      soak: mute,      'make-safe': stoppedMute,  says: /LOAD did not answer/ },
  late:            { 'pre-flight': completes, ramp: completes, search: completes, soak: completes, 'make-safe': stopped,      says: /LOAD left "[^"]+" unanswered/ },
  missing:         { 'pre-flight': completes, ramp: completes, search: completes, soak: completes, 'make-safe': stopped,      says: /LOAD left "[^"]+" unanswered/ },
  garbled:         { 'pre-flight': completes, ramp: completes, search: completes, soak: completes, 'make-safe': stopped,      says: /LOAD answered/, saysAt: { 'make-safe': byCtrlC } },
  garbage:         { 'pre-flight': mute,      ramp: mute,      search: mute,      soak: mute,      'make-safe': stoppedMute,  says: /LOAD (answers as|answered|is out of step)/ },
  split:           { 'pre-flight': completes, ramp: completes, search: completes, soak: completes, 'make-safe': stopped,      says: /read back/ },
  complaint:       { 'pre-flight': refused,   ramp: refused,   search: refused,   soak: refused,   'make-safe': stopped,      says: /LOAD reports -113 "Undefined header" after/, saysAt: { 'make-safe': byCtrlC } },
  'not-a-number':  { 'pre-flight': guarded,   ramp: guarded,   search: guarded,   soak: guarded,   'make-safe': stopped,      says: /voltage could not be read/, saysAt: { 'pre-flight': /voltage of the module could not be read/, 'make-safe': byCtrlC } },
  overload:        { 'pre-flight': guarded,   ramp: guarded,   search: guarded,   soak: guarded,   'make-safe': stopped,      says: /the load shows overload instead of a current/, saysAt: { 'make-safe': byCtrlC } },
  'over-voltage':  { 'pre-flight': guarded,   ramp: guarded,   search: guarded,   soak: guarded,   'make-safe': stopped,      says: /the meter reads 75\.00 V/, saysAt: { 'make-safe': byCtrlC } },
  stuck:           { 'pre-flight': guarded,   ramp: guarded,   search: guarded,   soak: guarded,   'make-safe': stopped,      says: /the load reads .* digit for digit as before/, saysAt: { 'make-safe': byCtrlC } },
  'meter-dropped': { 'pre-flight': completes, ramp: completes, search: completes, soak: completes, 'make-safe': stopped,      says: /METER: connection lost/, saysAt: { 'make-safe': byCtrlC } },
  'meter-gone':    { 'pre-flight': refused,   ramp: refused,   search: refused,   soak: refused,   'make-safe': stopped,      says: /METER: (connection lost|the connection is refused|there is no port)/, saysAt: { 'make-safe': byCtrlC } },
  'disk-full':     { 'pre-flight': diskFull,  ramp: diskFull,  search: diskFull,  soak: diskFull,  'make-safe': stopped,      says: /the disk is full/ },
  'clock-jump':    { 'pre-flight': completes, ramp: completes, search: completes, soak: completes, 'make-safe': stopped,      says: /read back/ },
};
