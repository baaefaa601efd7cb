import { can, writableKinds, type Action, type Principal, type Resource } from '#shared/permissions'
import type { AnswerOf } from '#shared/api/contract'
import type { contracts } from '#shared/api/contracts'

type Me = AnswerOf<typeof contracts.sessionRead>

/** Who is signed in, the workspace in view, and what would be refused. The server decides; this only leaves out dead ends. */
export function useAccount() {
  const api = useApi()
  const me = useState<Me | null>('me', () => null)
  const chosen = useCookie<string | null>('workspace', { sameSite: 'lax', maxAge: 365 * 24 * 3600 })

  const principal = computed<Principal | null>(() => me.value?.user
    ? { userId: me.value.user.id, name: me.value.user.name, email: me.value.user.email, operator: me.value.user.operator, memberships: me.value.memberships }
    : null)
  const workspaces = computed(() => [...new Map((me.value?.memberships ?? []).map(m => [m.workspaceId, { id: m.workspaceId, name: m.workspaceName, invented: m.invented }])).values()])
  const workspace = computed(() => workspaces.value.find(w => w.id === chosen.value) ?? workspaces.value[0] ?? null)
  const roles = computed(() => (me.value?.memberships ?? []).filter(m => m.workspaceId === workspace.value?.id).map(m => m.role))

  return {
    me, principal, workspaces, workspace, roles,
    may: (action: Action, resource: Resource = {}) => can(principal.value, action, { workspaceId: workspace.value?.id, ...resource }),
    kinds: computed(() => workspace.value ? writableKinds(principal.value, workspace.value.id) : []),
    chooseWorkspace: (id: string) => { chosen.value = id },
    load: async () => { me.value = await api('sessionRead') },
    signIn: async (email: string, password: string) => { me.value = await api('sessionCreate', { body: { email, password } }) },
    signOut: async () => {
      await api('sessionDelete')
      await api('sessionRead').then(answer => { me.value = answer })
    },
  }
}
