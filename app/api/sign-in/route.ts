import { handleSignIn } from '@/lib/auth/handle-sign-in'
import { parts } from '@/lib/wiring'

export function POST(request: Request): Promise<Response> {
  return handleSignIn(request, parts())
}
