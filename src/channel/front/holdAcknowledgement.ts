import type { App, Receiver, ReceiverEvent } from '@slack/bolt';

type Answer = Parameters<ReceiverEvent['ack']>[0];

/**
 * Holds every acknowledgement back until the listeners are done. In HTTP mode the framework does this itself
 * (`processBeforeResponse`); in socket mode it acknowledges an event before its listener has run, so that what is not written down
 * yet would be lost with the process. What a listener throws leaves the event unacknowledged: it comes again.
 */
export function holdAcknowledgement(receiver: Receiver): Receiver {
  const init = receiver.init.bind(receiver);
  receiver.init = (app) => {
    const processEvent = async (event: ReceiverEvent): Promise<void> => {
      let held: { readonly answer: Answer } | undefined;
      await app.processEvent({
        ...event,
        ack: async (answer) => {
          held = { answer };
        },
      });
      if (held) await event.ack(held.answer);
    };
    // The receiver calls nothing but this.
    init({ processEvent } as unknown as App);
  };
  return receiver;
}
