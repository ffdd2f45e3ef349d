package render

// caution is the caution of a setting: one short form for page one, and the
// full one for its section.
func caution(setting string) (short, full string) {
	const always = " It reads the results only against the plan and the smallest effect that the plan states; whether the plan asked the right question, and whether the data were collected as described, it cannot know."
	switch setting {
	case "clinical":
		return "This record supports professional judgement and does not replace it. It gives no advice on the care of any person, and defers to the applicable local rules and to licensed practice.",
			"The record supports clinical judgement and does not replace it. A result over groups does not decide the care of one person. Treatment, dosing and consent remain with licensed practitioners under the applicable local rules, ethics approvals and product information." + always
	case "safety":
		return "This record supports professional judgement and does not replace it. It releases nothing for use by itself, and defers to the applicable local rules, standards and licensed practice.",
			"The record supports safety judgement and does not replace it. An interval inside a limit is not a hazard analysis: severity, exposure, use outside the tested conditions and rare events need their own assessment by those licensed for it, under the applicable local rules and standards." + always
	case "quality":
		return "This record supports the judgement of those responsible for quality and does not replace it; release follows the applicable procedures.",
			"The record supports the judgement of those responsible for quality and does not replace it. It covers the lots, lines and conditions that were sampled; release, change control and complaints follow the applicable procedures." + always
	case "laboratory":
		return "This record supports the judgement of the laboratory and does not replace it; methods are released by the applicable procedures.",
			"The record supports the judgement of the laboratory and does not replace it. It covers the materials, instruments and operators that took part; validation, calibration and reporting follow the applicable procedures and local rules." + always
	case "field":
		return "This record supports the judgement of those responsible and does not replace it; it covers the sites and seasons observed.",
			"The record supports the judgement of those responsible in the field and does not replace it. It covers the sites, seasons and conditions observed; use elsewhere needs its own evidence, and local rules apply." + always
	case "education":
		return "This record supports the judgement of teachers and schools and does not replace it; it decides about no single learner.",
			"The record supports the judgement of teachers and schools and does not replace it. A result over groups decides about no single learner; the applicable local rules and policies apply." + always
	}
	return "This record supports the judgement of those responsible and does not replace it; the applicable local rules apply.",
		"The record supports the judgement of those responsible and does not replace it. It covers what was observed, and the applicable local rules apply." + always
}

// strictSetting reports whether the caution belongs on page one by rule.
func strictSetting(setting string) bool { return setting == "clinical" || setting == "safety" }

// noSignature is said beside every sign-off.
const noSignature = "The program makes no electronic signature. Sign by hand, or in the system that your procedures name."

// Caution is the short caution of a setting.
func Caution(setting string) string {
	s, _ := caution(setting)
	return s
}
