import type { Instrument } from '../instrument/instrument.js';
import type { Session } from '../instrument/session.js';
import type { Measurement } from '../instrument/scpi-number.js';
import { formatQuantity } from '../quantity/format-quantity.js';
import type { Amperes, Volts, Watts } from '../quantity/quantity.js';
import { BeyondCeilingError, DisobeyedError, LoadWentOffError } from './bench-error.js';
import { type Ceilings, ceilingText, overCurrentFactor } from './ceilings.js';

export type InputState = 'on' | 'off';

const switchOffByHand =
  'switch it off by hand; then `railproof drivers --try` shows which messages it understands';

/**
 * Told of each change of the input, after it was read back; and, unconfirmed, before it is switched on. What it
 * throws then keeps the input off.
 */
export type InputListener = (state: InputState, confirmed: boolean) => void;

/**
 * An electronic load that keeps the bench's ceilings and reads its input's state back. When it answers again
 * after a gap, that state is read before anything else, and held against what it was.
 */
export class Load {
  readonly instrument: Instrument;
  readonly #ceilings: Ceilings;
  readonly #onInput: InputListener;
  /** As last read back; nothing is expected of one that was never read, or is just being switched. */
  #input: InputState | 'going-on' | 'unknown' = 'unknown';

  constructor(instrument: Instrument, ceilings: Ceilings, onInput: InputListener) {
    this.instrument = instrument;
    this.#ceilings = ceilings;
    this.#onInput = onInput;
    instrument.lookFirst((session, tellAgain) => this.#lookFirst(session, tellAgain));
  }

  /** Constant-current mode at 0 A, the load's own protections set where it has them. The input is not touched. */
  async prepare(): Promise<void> {
    await this.instrument.perform('current-mode');
    await this.unload();
    if (this.instrument.has('protect-current')) {
      await this.instrument.perform('protect-current', { amps: this.#mostCurrent() });
    }
    if (this.instrument.has('protect-voltage')) {
      await this.instrument.perform('protect-voltage', { volts: this.#ceilings.voltage.value });
    }
    if (this.instrument.has('protect-power')) {
      await this.instrument.perform('protect-power', { watts: this.#mostPower() });
    }
  }

  /** A set-point of 0 A; the input is not touched. */
  async unload(): Promise<void> {
    await this.instrument.perform('set-current', { amps: 0 });
  }

  /**
   * `volts` is the highest voltage that the module may keep at that current: its open-circuit voltage. So the
   * power is known before it flows.
   * @throws BeyondCeilingError before anything is sent.
   */
  async setCurrent(amps: Amperes, volts: Volts): Promise<void> {
    const { current, power } = this.#ceilings;
    const asked = formatQuantity(amps, 'current', { significant: 4 });
    if (!(amps <= current.value)) {
      throw new BeyondCeilingError(asked, ceilingText(current, 'current'), current.setBy);
    }
    if (!(amps * volts <= power.value)) {
      const at = formatQuantity(volts, 'voltage', { significant: 4 });
      const taken = formatQuantity(amps * volts, 'power', { significant: 4 });
      throw new BeyondCeilingError(
        `${asked} at ${at}, which is ${taken},`,
        ceilingText(power, 'power'),
        power.setBy,
      );
    }
    await this.instrument.perform('set-current', { amps: Math.max(0, amps) });
  }

  /**
   * Constant voltage: what flows is the module's doing, so only the guards and the load's own protection keep
   * it below the ceilings.
   */
  async setVoltage(volts: Volts): Promise<void> {
    await this.instrument.perform('set-voltage', { volts: Math.max(0, volts) });
  }

  /** With the input off: what is set of the one means nothing in the other. */
  async mode(mode: 'current' | 'voltage'): Promise<void> {
    await this.instrument.perform(`${mode}-mode`);
  }

  /** @throws DisobeyedError when the load says that its input is still off. */
  async inputOn(): Promise<void> {
    // Told beforehand: whatever becomes of us in between, no record shall lack it.
    this.#onInput('on', false);
    this.#input = 'going-on';
    await this.instrument.perform('input-on');
    const confirmed = await this.isOn();
    this.#onInput(confirmed ? 'on' : 'off', true);
    if (!confirmed)
      throw new DisobeyedError(
        this.address,
        'was told to switch its input on and says that it is off',
        'look at its panel: what does it protect itself against, does it wait for a key there?',
      );
  }

  /** @throws DisobeyedError when the load says that its input is still on. */
  async inputOff(): Promise<void> {
    this.#input = 'unknown';
    await this.instrument.perform('input-off');
    const confirmed = !(await this.isOn());
    this.#onInput('off', confirmed);
    if (!confirmed)
      throw new DisobeyedError(
        this.address,
        'was told to switch its input off and says that it is on',
        switchOffByHand,
      );
  }

  /**
   * Off by the driver's make-safe messages, whatever state the load was in; read back. A load that complains
   * may be off all the same, so what it says of its input decides.
   * @throws DisobeyedError when the load says that its input is still on.
   */
  async makeSafe(): Promise<void> {
    this.#input = 'unknown';
    // What its input says decides, whatever it said, or did not say, of how it was told.
    const complaint: unknown = await this.instrument.perform('make-safe').then(
      () => undefined,
      (error: unknown) => error,
    );
    const confirmed = !(await this.isOn().catch((error: unknown) => {
      throw complaint ?? error;
    }));
    this.#onInput('off', confirmed);
    if (!confirmed) {
      const part = { driver: this.instrument.driver.name, section: 'operations', name: 'make-safe' } as const;
      throw new DisobeyedError(
        this.address,
        'was made safe and says that its input is on',
        switchOffByHand,
        'load',
        { part, complaint },
      );
    }
  }

  /**
   * A load whose own error carries it over the ceiling must not switch itself off there: that would end the
   * run. The ceiling leaves 5 % below the rating.
   */
  #mostCurrent(): Amperes {
    const rated = this.instrument.driver.ratings.current ?? Number.POSITIVE_INFINITY;
    return Math.min(this.#ceilings.current.value * overCurrentFactor, rated);
  }

  /** The guards stop the run at the ceiling; the load's own protection stands behind them, not before. */
  #mostPower(): Watts {
    const rated = this.instrument.driver.ratings.power ?? Number.POSITIVE_INFINITY;
    return Math.min(this.#ceilings.power.value * overCurrentFactor, rated);
  }

  async isOn(): Promise<boolean> {
    const on = await this.instrument.flag('input-state');
    this.#input = stateOf(on);
    return on;
  }

  readVoltage(): Promise<Measurement> {
    return this.instrument.read('voltage');
  }

  readCurrent(): Promise<Measurement> {
    return this.instrument.read('current');
  }

  get address(): string {
    return this.instrument.address;
  }

  /**
   * One that is on keeps what it was told. One that is off may have lost its power, and with it all that it was
   * told; so it is told again, and its input left as it is.
   * @throws LoadWentOffError, DisobeyedError when it is not as it was
   */
  async #lookFirst(session: Session, tellAgain: () => Promise<void>): Promise<string> {
    const before = this.#input;
    const now = stateOf(await session.flag('input-state'));
    this.#onInput(now, true);
    if (before === 'on' && now === 'off') throw new LoadWentOffError(this.address);
    if (before === 'off' && now === 'on') {
      throw new DisobeyedError(
        this.address,
        'was off and is on now that it answers again',
        'somebody at its panel, another program, or the way it starts up: find out which before it is used again',
      );
    }
    if (now === 'off') await tellAgain();
    if (now === 'off' && before === 'going-on') this.#onInput('on', false);
    return `its input is ${before === now ? 'still ' : ''}${now}`;
  }
}

function stateOf(on: boolean): InputState {
  return on ? 'on' : 'off';
}
