import { applied, type ViewMessage, type ViewState } from '../view-state.js';

/** Follows the runner's stream of messages and keeps the state that they amount to. */
const stream = new EventSource('/events');
let state: ViewState | undefined;
stream.addEventListener('message', (event: MessageEvent<string>) => {
  const message = JSON.parse(event.data) as ViewMessage;
  if (message.kind === 'everything') state = message.state;
  else if (state !== undefined) state = applied(state, message);
});
