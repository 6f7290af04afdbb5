import { AppError, inputs, type Envelope, type MethodName } from '../../shared-core/contract/index.ts';
import type { Context } from './context.ts';
import { exportHandlers } from './handlers/exporting.ts';
import type { Handlers } from './handlers/handler.ts';
import { intakeHandlers } from './handlers/intake.ts';
import { journalHandlers } from './handlers/journal.ts';
import { referenceHandlers } from './handlers/references.ts';
import { reviewHandlers } from './handlers/review.ts';
import { schemeHandlers } from './handlers/scheme.ts';
import { sectionHandlers } from './handlers/sections.ts';

const handlers: Handlers = {
  ...sectionHandlers,
  ...schemeHandlers,
  ...intakeHandlers,
  ...referenceHandlers,
  ...reviewHandlers,
  ...exportHandlers,
  ...journalHandlers,
};

/** Answers one call: name → validate → handler → envelope. Never rejects; what fails inside is told without its inner message. */
export async function dispatch(context: Context, name: unknown, input: unknown): Promise<Envelope<unknown>> {
  if (typeof name !== 'string' || !Object.hasOwn(inputs, name)) {
    return failure(
      new AppError(
        'unknown-method',
        'The window asked for something that this version does not know; reload it.',
      ),
    );
  }
  const method = name as MethodName;
  const parsed = inputs[method].safeParse(input);
  if (!parsed.success) {
    const issue = parsed.error.issues[0];
    const where = issue === undefined || issue.path.length === 0 ? 'the request' : issue.path.join('.');
    return failure(
      new AppError('bad-input', `${where} cannot be used: ${issue?.message ?? 'unknown'}.`, { method }),
    );
  }
  try {
    const handler = handlers[method] as (context: Context, input: unknown) => Promise<unknown>;
    return { ok: true, value: await handler(context, parsed.data) };
  } catch (error) {
    if (error instanceof AppError) return failure(error);
    return failure(
      new AppError(
        'internal',
        'Something went wrong inside the program; nothing was changed. Try again, and report it if it stays.',
        { method, detail: error instanceof Error ? error.name : 'unknown' },
      ),
    );
  }
}

function failure({ code, message, details }: AppError): Envelope<never> {
  return { ok: false, error: { code, message, details } };
}
