export interface GateCheck {
  passed: boolean
  fact: string
  why?: string
}
