package effect

import "steelyard/protocol/record"

func crossover(word string, scale record.Scale, in Input) (*Inference, *Problem) {
	return nil, problem("S104", noMethod, word, "crossover", "")
}
