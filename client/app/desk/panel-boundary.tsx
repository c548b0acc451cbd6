import { Component, type ReactNode } from 'react'
import { Button } from '@client/ui/button'
import { Notice } from '@client/ui/notice'

interface Props {
  /** What stands here: "the comments". */
  name: string
  children: ReactNode
}

/** One for each panel of the desk, so that a broken one never stops the sound. */
export class PanelBoundary extends Component<Props, { isBroken: boolean }> {
  override state = { isBroken: false }

  static getDerivedStateFromError(): { isBroken: boolean } {
    return { isBroken: true }
  }

  override render(): ReactNode {
    if (!this.state.isBroken) return this.props.children
    return (
      <Notice kind="fault" next={<Button onClick={() => this.setState({ isBroken: false })}>Show it again</Button>}>
        Something went wrong with {this.props.name}. The rest of the desk goes on.
      </Notice>
    )
  }
}
