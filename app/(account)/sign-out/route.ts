import { handleSignOut } from '@/lib/auth/handle-sign-out'
import { parts } from '@/lib/wiring'

export function POST(request: Request): Promise<Response> {
  return handleSignOut(request, parts())
}
