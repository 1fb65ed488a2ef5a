/** What whoever runs the gateway program can mend: one clear sentence, shown without a stack. */
export class GatewayError extends Error {
  constructor(sentence: string) {
    super(sentence)
    this.name = 'GatewayError'
  }
}
