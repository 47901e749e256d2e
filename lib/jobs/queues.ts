/** Every queue there is; each has exactly one handler, which the worker checks when it starts. */
export const queueNames = ['mail.send', 'upload.check', 'analysis.run'] as const
export type QueueName = (typeof queueNames)[number]
