// jsdom 26 has neither modal dialogs nor popovers: these keep the parts of their behaviour that the kit leans on.
export function standInForLayers(): void {
  HTMLDialogElement.prototype.showModal = function showModal() {
    this.open = true
  }
  HTMLDialogElement.prototype.close = function close() {
    this.open = false
  }
  HTMLElement.prototype.showPopover = () => undefined
}
