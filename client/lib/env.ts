export const env = {
  /** Answers of the server are checked against the contract while developing and testing. */
  isChecked: import.meta.env.MODE !== 'production'
}
