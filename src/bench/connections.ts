import type { Connect } from '../instrument/connect.js';
import type { Connection } from '../instrument/connection.js';

/**
 * Every connection that a bench has opened, so that all of them can be given up at once: a question that waits
 * on any of them, the load's or a silent meter's, then ends at once too.
 */
export class Connections {
  readonly #connect: Connect;
  readonly #opened = new Set<Connection>();

  constructor(connect: Connect) {
    this.#connect = connect;
  }

  readonly connect: Connect = async (...wanted) => {
    const connection = await this.#connect(...wanted);
    this.#opened.add(connection);
    return connection;
  };

  /** Those opened so far; later ones are not touched. Never rejects. */
  async giveUp(): Promise<void> {
    const opened = [...this.#opened];
    this.#opened.clear();
    await Promise.all(opened.map((connection) => connection.close()));
  }
}
