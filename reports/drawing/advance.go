package drawing

// advances are how wide the letters from space to tilde are in DejaVu Sans 2.37, in thousandths of
// the size, from the font's own table.
var advances = [...]uint16{
	318, 401, 460, 838, 636, 950, 780, 275, 390, 390, 500, 838, 318, 361, 318, 337,
	636, 636, 636, 636, 636, 636, 636, 636, 636, 636, 337, 337, 838, 838, 838, 531,
	1000, 684, 686, 698, 770, 632, 575, 775, 752, 295, 295, 656, 557, 863, 748, 787,
	603, 787, 695, 635, 611, 732, 684, 989, 685, 611, 685, 390, 337, 390, 838, 500,
	500, 613, 635, 550, 635, 615, 352, 635, 634, 278, 278, 579, 278, 974, 634, 612,
	635, 635, 411, 521, 392, 634, 592, 818, 592, 592, 525, 636, 337, 636, 838,
}

// otherAdvance is taken for every other letter: the minus sign, the widest of those in charts.
const otherAdvance = 838

// advance returns how wide a text is for a size of 1.
func advance(text string) float64 {
	sum := 0
	for _, r := range text {
		if i := int(r) - ' '; i >= 0 && i < len(advances) {
			sum += int(advances[i])
		} else {
			sum += otherAdvance
		}
	}
	return float64(sum) / 1000
}
