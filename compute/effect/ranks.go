package effect

// ranks are methods still to come.
var ranks = map[string]map[string]analysis{}
