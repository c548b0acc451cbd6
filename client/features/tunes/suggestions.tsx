/** What a text field offers while it is typed in; name its `id` in the field's `list`. */
export function Suggestions({ id, values }: { id: string; values: readonly string[] }) {
  return (
    <datalist id={id}>
      {values.map((value) => (
        <option key={value}>{value}</option>
      ))}
    </datalist>
  )
}
