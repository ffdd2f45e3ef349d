package wording

import "strings"

// IsEnglish reports whether a text is English, by the share of the small words
// that no English prose does without, against those of other languages. It is
// careful: what it is not sure of is not English, so that nothing is judged
// by the rules of a language in which it was not written.
func IsEnglish(text string) bool {
	english, other, all := 0, 0, 0
	for _, s := range sentences(text) {
		for _, w := range s.tokens {
			if isDigit(w.text[0]) || w.text == "%" {
				continue
			}
			all++
			switch {
			case englishSmall[w.text]:
				english++
			case otherSmall[w.text] || beyondLatin(w.text):
				other++
			}
		}
	}
	if all <= 4 {
		return all > 0 && other == 0
	}
	return english > other && english*7 >= all && other*6 <= all
}

// beyondLatin reports whether a word holds a letter that English prose does
// not use; Greek letters are taken for symbols when they stand alone.
func beyondLatin(word string) bool {
	n := 0
	for _, r := range word {
		if n++; r > 0x24f && (r < 0x370 || r > 0x3ff) {
			return true
		}
		if r >= 0x370 && r <= 0x3ff && n > 1 {
			return true
		}
	}
	return false
}

func set(words string) map[string]bool {
	m := map[string]bool{}
	for _, w := range strings.Fields(words) {
		m[w] = true
	}
	return m
}

var englishSmall = set(`the a an of and to is was that for with not on are be this by it as from at no were than which has have had
but we or there between these those its can may both does did do been will would should our what when more less
if any all into only also so such their they after before within under over new in each other no one here how where
whether until while about because same us you your i he she his her them then some most too very could might must`)

// otherSmall are small words of German, French, Spanish, Italian, Portuguese,
// Dutch and the Scandinavian languages that are no English words.
var otherSmall = set(`der das und ist nicht ein eine einer einem einen den dem des von zu mit auf für sich als auch wird wurde sind
bei nach oder wir es zwischen kein keine keinen dass durch werden haben hat ergibt le la les une et est pas que qui dans pour sur avec ne
du au aux il elle sont entre nous ce cette sans plus el los las una y del se por con para más como fue no hay
não um uma os em da dos com foi lo gli di che è della sono nel tra fra het een van en niet dat zijn met voor aan er wordt werd geen
og av som på til ikke det att och är inte för med var mellan ingen ingeen neen aucune aucun différence diferencia`)
