// Prints the page; the print style does the rest.
import { Button } from '#app/components/ui/button.tsx'

export function PrintButton() {
  return (
    <Button look="main" onClick={() => window.print()}>
      Print
    </Button>
  )
}
