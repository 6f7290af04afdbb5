/** Options of a ChoiceField from a record of labels, in its order. */
export function choicesOf<Value extends string>(
  labels: Readonly<Record<Value, string>>,
): readonly { readonly value: Value; readonly label: string }[] {
  return (Object.keys(labels) as Value[]).map((value) => ({ value, label: labels[value] }));
}
