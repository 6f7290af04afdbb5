import type { AppEvent, ErrorCode, InputOf, MethodName, OutputOf } from '../../shared-core/contract/index.ts';
import { text } from '../text/index.ts';
import { findTransport, type Transport } from './transport.ts';

/** A call that was answered with an error: its sentence is for people. */
export class CallError extends Error {
  override readonly name = 'CallError';
  readonly code: ErrorCode;
  constructor(code: ErrorCode, message: string) {
    super(message);
    this.code = code;
  }
}

let transport: Transport | null = null;
function current(): Transport {
  transport ??= findTransport(text.common.unreachable);
  return transport;
}

/** Calls a method of the back end. @throws CallError with a sentence for people. */
export async function ask<M extends MethodName>(method: M, input: InputOf<M>): Promise<OutputOf<M>> {
  const reply = await current().call(method, input);
  if (!reply.ok) throw new CallError(reply.error.code, reply.error.message);
  return reply.value as OutputOf<M>;
}

/** @returns a function that ends the subscription. */
export function onAppEvent(listener: (event: AppEvent) => void): () => unknown {
  return current().onEvent(listener);
}
