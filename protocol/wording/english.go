package wording

import "strings"

// English reports whether a text is English, by counting the small words that
// no text does without, in English against those of other languages. A text
// of one to three words is taken for English unless it holds other words.
func English(text string) bool {
	english, other, all := 0, 0, 0
	for _, s := range sentences(text) {
		for _, w := range s.words {
			all++
			if small[w.text] {
				english++
			}
			if foreign[w.text] {
				other++
			}
			for _, r := range w.text {
				if r > 0x24f { // beyond Latin letters
					other++
					break
				}
			}
		}
	}
	if all <= 3 {
		return other == 0
	}
	return english > other && english*8 >= all
}

func set(words string) map[string]bool {
	m := map[string]bool{}
	for _, w := range strings.Fields(words) {
		m[w] = true
	}
	return m
}

var small = set(`the a an of and to in is was that for with not on are be this by it as from at no were than which has have
but we or there between these its can cannot may both does did do been will would should our than what when more less
if any all into only also so such their they after before within under over new`)

// foreign are small words of German, French, Spanish, Italian, Portuguese,
// Dutch and the Scandinavian languages that are no English words.
var foreign = set(`der die das und ist nicht ein eine einer einem den dem des von zu mit auf für sich als auch wird wurde sind
bei nach oder wir es zwischen kein keine le la les une des et est pas que qui dans pour sur avec ne du au aux il elle sont
entre nous ce cette el los las una y que del se por con para más como es entre fue não um uma os em da dos das com
foi il lo gli di che è un non della sono nel tra fra het een van en niet dat zijn met voor aan er wordt werd geen og
av som på til ikke det den att och är inte för med var mellan ingen`)
