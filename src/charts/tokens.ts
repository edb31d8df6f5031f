/** The colours that a chart draws with, read from the page's tokens so that charts follow the theme. */
export interface ChartTokens {
  ground: string
  raised: string
  sunk: string
  text: string
  textSecond: string
  textThird: string
  hairline: string
  controlBorder: string
  brass: string
  data: string
  inControl: string
  alertMark: string
  alertText: string
  action: string
}

export function readChartTokens(element: Element = document.documentElement): ChartTokens {
  const style = getComputedStyle(element)
  const token = (name: string): string => style.getPropertyValue(`--${name}`).trim()
  return {
    ground: token('ground'),
    raised: token('raised'),
    sunk: token('sunk'),
    text: token('text'),
    textSecond: token('text-second'),
    textThird: token('text-third'),
    hairline: token('hairline'),
    controlBorder: token('control-border'),
    brass: token('brass'),
    data: token('data'),
    inControl: token('in-control'),
    alertMark: token('alert-mark'),
    alertText: token('alert-text'),
    action: token('action'),
  }
}
