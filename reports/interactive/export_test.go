package interactive

// Evaluation is the script without the page: rounding, units and the model.
func Evaluation() string { return script(scripts[:5]) }
