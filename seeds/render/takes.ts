import { ferryMoneyBand } from './takes/ferry-money-band'
import { ferryMoneyTomas } from './takes/ferry-money-tomas'
import { quayLanternPell } from './takes/quay-lantern-pell'
import { quayLanternWren } from './takes/quay-lantern-wren'
import { slackTideInes } from './takes/slack-tide-ines'
import { slackTideMara } from './takes/slack-tide-mara'

export const takes = [slackTideInes, slackTideMara, ferryMoneyTomas, ferryMoneyBand, quayLanternWren, quayLanternPell]
