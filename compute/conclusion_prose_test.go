package compute

import (
	"strings"
	"testing"
)

// Whole conclusions, invented, of which a careful reviewer would let every
// sentence pass. A line with @ sets the scene of those below it.
const prose = `@ claim=superior verdict=open label="Pain score" unit=mm better=lower groups="gel/cream" reading=0,0
This trial compared a warming gel with a cooling cream in 80 adults after knee surgery. Pain at 24 hours was the primary outcome. The mean score was 31 mm with the gel and 34 mm with the cream, a difference of 3 mm (90 % interval 9 mm lower to 3 mm higher). Superiority of the gel was therefore not established. Benefits of up to 9 mm, which many patients would notice, remain possible, and so does a small disadvantage. We do not recommend a change of practice. A second trial with 250 patients per group is being planned; its protocol will be sealed before the first patient is enrolled.
The results do not tell us if the gel is worth its price. The board asked whether a longer follow-up would help; in our view it would not, because most of the pain is gone by day 3. Until better evidence is at hand, either product may be chosen on grounds of cost and preference.
@ claim=noninferior verdict=established label="Closure within 12 weeks" unit=% better=higher groups="weekly dressing/alternate-day dressing" reading=1,0
The weekly dressing is noninferior to the alternate-day dressing for closure within 12 weeks: a loss of ten points or more is excluded at a one-sided error of 0.025. The estimate is 2 points in favour of the alternate-day dressing (95 % interval from 9 points lower to 5 points higher). Whether closure is a little less frequent with the weekly dressing is not settled. Nurses save about four visits per patient. We will offer the weekly dressing to all patients of the clinic who want it.
Changing the dressing less often did not lower closure by more than the margin. This says nothing about infected wounds, which were excluded from the trial.
@ claim=equivalent verdict=established label="Moisture" unit=% better=neither groups="fast method/reference method" reading=1,1
The fast method agrees with the reference method to within 0.3 points on average, which was the region chosen in advance. Single readings can differ by more. The fast method is faster and will be used for routine control; disputes are settled with the reference method.
@ claim=below verdict=open label="Leak share" unit=% better=lower reading=none
Two of 300 pouches leaked. With so few leaks the upper limit is 2.4 %, above the 2 % allowed, so the requirement is not shown to be met. Another 300 pouches will be tested before the lot is released. The leaks were found at the top seal.
@ claim=superior verdict=established label="Germination" unit=% better=higher groups="primed seed/raw seed" reading=2,0
Primed seed germinated better than raw seed: 91 % against 84 %, a difference of 7 points (90 % interval 3 to 11 points). Superiority is established at the planned level; whether the gain reaches the 8 points that would pay for priming is open. The seed came from one grower and one year, and the result may not carry over to other lots. We will prime the seed for the spring sowing of the trial plots only.`

func TestProsePasses(t *testing.T) {
	var k checker
	for _, line := range strings.Split(prose, "\n") {
		if line[0] == '@' {
			k = scene(t, line[1:])
			continue
		}
		again := k
		for _, f := range again.check(line) {
			t.Errorf("%s for %q in %q", f.code, line[f.at.Start:f.at.End], line)
		}
	}
}
