import NextAuth from 'next-auth'
import type { NextRequest } from 'next/server'
import { authConfig } from '@/lib/auth/auth-config'
import { handleLibraryRequest } from '@/lib/auth/handle-library-request'
import { parts } from '@/lib/wiring'

const { handlers } = NextAuth(() => authConfig(parts()))

export function GET(request: NextRequest): Promise<Response> {
  return handleLibraryRequest(request, parts(), handlers.GET)
}

export function POST(request: NextRequest): Promise<Response> {
  return handleLibraryRequest(request, parts(), handlers.POST)
}
