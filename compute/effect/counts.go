package effect

// counts are methods still to come.
var counts = map[string]map[string]analysis{}
