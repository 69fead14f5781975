import { mountSuspended, registerEndpoint } from '@nuxt/test-utils/runtime'
import { readBody, setResponseStatus } from 'h3'
import { afterEach, describe, expect, it, vi } from 'vitest'
import SignInForm from '~/components/shell/SignInForm.vue'
import { useSessionStore } from '~/stores/session'
import type { Me } from '#shared/schemas/auth'

const ME: Me = {
  user: {
    id: '01890a5d-ac96-774b-bcce-b302099a8057',
    name: 'Orrin Pallister',
    email: 'orrin@shop.test',
    unitSystem: 'metric',
    theme: 'dark',
  },
  shop: { id: '01890a5d-ac96-774b-bcce-b302099a8058', name: 'A shop', unitSystem: 'us' },
  role: 'estimator',
}

/** What the server was asked, and how it shall answer next. */
const asked: unknown[] = []
let refusal: { status: number; code: string; message: string } | undefined

registerEndpoint('/api/auth/sign-in', {
  method: 'POST',
  handler: async (event) => {
    asked.push(await readBody(event))
    if (!refusal) return ME
    setResponseStatus(event, refusal.status)
    return { error: { code: refusal.code, message: refusal.message, requestId: 'r-1' } }
  },
})

async function mountForm() {
  const form = await mountSuspended(SignInForm, { attachTo: document.body })
  const [email, password] = [form.find('input[name="email"]'), form.find('input[name="password"]')]
  const errorOf = (input: typeof email) => {
    const id = input.attributes('aria-describedby')
    return id === undefined ? '' : form.find(`[id="${id}"]`).text()
  }
  return { form, email, password, errorOf, submit: () => form.find('form').trigger('submit') }
}

afterEach(() => {
  asked.length = 0
  refusal = undefined
  useSessionStore().me = null
  document.body.innerHTML = ''
})

describe('the sign-in form', () => {
  it('tells a password manager what is what, and can never put a password into an address', async () => {
    const { form, email, password } = await mountForm()
    expect(email.attributes()).toMatchObject({ type: 'email', autocomplete: 'username' })
    expect(password.attributes()).toMatchObject({ type: 'password', autocomplete: 'current-password' })
    expect(form.find('form').attributes('method')).toBe('post')
  })

  it('says beside each field what is missing, goes to the first, and asks nobody', async () => {
    const { email, password, errorOf, submit } = await mountForm()
    await submit()
    await vi.waitFor(() => expect(errorOf(email)).toContain('is missing'))
    expect(errorOf(password)).toContain('is missing')
    expect(document.activeElement).toBe(email.element)
    expect(asked).toEqual([])

    await email.setValue('orrin')
    await password.setValue('secret')
    await submit()
    await vi.waitFor(() => expect(errorOf(email)).toContain('name@example.test'))
    expect(errorOf(password)).toBe('')
    expect(asked).toEqual([])
  })

  it('keeps what was typed when the server refuses, and says so', async () => {
    refusal = { status: 401, code: 'wrong_credentials', message: 'E-mail or password is not right.' }
    const { form, email, password, submit } = await mountForm()
    await email.setValue('orrin@shop.test')
    await password.setValue('wrong')
    await submit()
    await vi.waitFor(() =>
      expect(form.find('[role="alert"]').text()).toContain('E-mail or password is not right.'),
    )
    expect((email.element as HTMLInputElement).value).toBe('orrin@shop.test')
    expect((password.element as HTMLInputElement).value).toBe('wrong')
    expect(form.emitted('done')).toBeUndefined()
    expect(useSessionStore().me).toBeNull()
  })

  it('signs in, and brings the units and theme of the person along', async () => {
    const { form, email, password, submit } = await mountForm()
    await email.setValue('orrin@shop.test')
    await password.setValue('secret')
    await submit()
    await vi.waitFor(() => expect(form.emitted('done')).toHaveLength(1))
    expect(asked).toEqual([{ email: 'orrin@shop.test', password: 'secret' }])
    const session = useSessionStore()
    expect(session.me?.user.name).toBe('Orrin Pallister')
    expect(session.unitsChoice).toBe('metric')
  })

  it('shows the password on request', async () => {
    const { form, password } = await mountForm()
    await form.find('input[type="checkbox"]').setValue(true)
    expect(password.attributes('type')).toBe('text')
  })
})
