import { render, screen } from '@testing-library/react'
import { userEvent } from '@testing-library/user-event'
import { expect, test, vi } from 'vitest'

import { Checkbox, PasswordField, RadioGroup, SelectField, TextField } from './field.tsx'

test('a field is called by its label, and what is wrong with it is said before what it wants', () => {
  render(<TextField label="Serial" hint="On the plate." error="Write the serial." />)
  const field = screen.getByRole('textbox', { name: 'Serial' })
  expect(field).toHaveAccessibleDescription('Write the serial. On the plate.')
  expect(field).toBeInvalid()
})

test('a field that nothing is wrong with is not called invalid', () => {
  render(<TextField label="Serial" />)
  const field = screen.getByRole('textbox', { name: 'Serial' })
  expect(field).toBeValid()
  expect(field).not.toHaveAttribute('aria-describedby')
})

test('a password is masked until it is asked for, and a manager knows which one it is', async () => {
  const user = userEvent.setup()
  render(<PasswordField label="Password" autoComplete="new-password" />)
  const field = screen.getByLabelText('Password')
  expect(field).toHaveAttribute('type', 'password')
  expect(field).toHaveAttribute('autocomplete', 'new-password')
  await user.click(field)
  await user.paste('pasted words')
  await user.click(screen.getByRole('button', { name: 'Show password' }))
  expect(field).toHaveAttribute('type', 'text')
  expect(field).toHaveValue('pasted words')
  await user.click(screen.getByRole('button', { name: 'Hide password' }))
  expect(field).toHaveAttribute('type', 'password')
})

test('a group of answers is called by its question; the whole row of an answer is pressed', async () => {
  const onChange = vi.fn()
  render(
    <RadioGroup
      label="Engine"
      name="engine"
      value="two-stroke"
      onChange={(event) => onChange(event.target.value)}
      choices={[
        { value: 'two-stroke', words: 'Two-stroke', hint: 'Oil in the fuel' },
        { value: 'four-stroke', words: 'Four-stroke' },
      ]}
      error="Choose one."
    />,
  )
  expect(screen.getByRole('group', { name: 'Engine' })).toHaveAccessibleDescription('Choose one.')
  expect(screen.getByRole('radio', { name: /Two-stroke/ })).toBeChecked()
  await userEvent.setup().click(screen.getByText('Four-stroke'))
  expect(onChange).toHaveBeenCalledWith('four-stroke')
})

test('a list and a box are called by their labels', async () => {
  const onChange = vi.fn()
  render(
    <>
      <SelectField label="Class" choices={[{ value: 'chain-saw', words: 'Chain saw' }]} />
      <Checkbox label="Gloves" hint="larger targets" onChange={onChange} />
    </>,
  )
  expect(screen.getByRole('combobox', { name: 'Class' })).toHaveDisplayValue('Chain saw')
  await userEvent.setup().click(screen.getByRole('checkbox', { name: /Gloves/ }))
  expect(onChange).toHaveBeenCalledOnce()
})
