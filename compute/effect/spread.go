package effect

// spread are methods still to come.
var spread = map[string]map[string]analysis{}
