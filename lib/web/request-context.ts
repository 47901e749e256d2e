import 'server-only'
import { cookies, headers } from 'next/headers'
import { redirect } from 'next/navigation'
import { cache } from 'react'
import { findActor } from '@/lib/auth/find-actor'
import { sessionCookieName } from '@/lib/auth/session-cookie'
import type { AnonymousContext, Context } from '@/lib/context'
import type { Actor } from '@/lib/domain/actor'
import { SignInNeeded } from '@/lib/domain/errors'
import { parts, systemContext } from '@/lib/wiring'
import { paths } from './paths'
import { pagePathHeader } from './page-path-header'
import { safePath } from './safe-path'

/** Who is signed in, with the roles the database gives this person now; asked once a request. */
export const currentActor = cache(async (): Promise<Actor | null> => {
  const { config, db } = parts()
  const token = (await cookies()).get(sessionCookieName(config.baseUrl))?.value
  return findActor(db, token)
})

/** For pages: who is signed in, or off to sign in and back. */
export async function requireActor(): Promise<Actor> {
  const actor = await currentActor()
  if (actor) return actor
  const page = (await headers()).get(pagePathHeader)
  redirect(paths.signIn(page ? safePath(page) : undefined))
}

/** @throws {SignInNeeded} */
export async function requestContext(): Promise<Context> {
  const actor = await currentActor()
  if (!actor) throw new SignInNeeded()
  return { ...systemContext(), actor }
}

export function anonymousContext(): AnonymousContext {
  return systemContext()
}
