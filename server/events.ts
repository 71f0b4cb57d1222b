/** What happened in the process and others act on: a withdrawal cuts running downloads. */
export interface EditionWithdrawn {
  waveformId: string;
  editionId: string;
  revisionId: string;
  editionNumber: number;
  reason: string;
}

type Listener<T> = (event: T) => void;

export interface Signal<T> {
  /** Gives back the way out. */
  listen(listener: Listener<T>): () => void;
  /** Call it after the transaction; a listener that throws stops none of the others. */
  emit(event: T): void;
}

export interface Events {
  readonly editionWithdrawn: Signal<EditionWithdrawn>;
}

function createSignal<T>(onError: (error: unknown) => void): Signal<T> {
  const listeners = new Set<Listener<T>>();
  return {
    listen(listener) {
      listeners.add(listener);
      return () => void listeners.delete(listener);
    },
    emit(event) {
      for (const listener of listeners) {
        try {
          listener(event);
        } catch (error) {
          onError(error);
        }
      }
    },
  };
}

export function createEvents(onError: (error: unknown) => void): Events {
  return { editionWithdrawn: createSignal(onError) };
}
