package workshop

import (
	"fmt"
	"unicode"
	"unicode/utf8"

	"turnwise/models"
)

// threadWord sets a hand beside the screws everybody has in a drawer.
func threadWord(hand models.Sense) string {
	if hand == models.Left {
		return "OPPOSITE to an ordinary screw thread"
	}
	return "LIKE an ordinary screw thread"
}

// rotation is the way round of a hand, seen from the open end.
func rotation(hand models.Sense) string {
	if hand == models.Left {
		return "clockwise"
	}
	return "anticlockwise"
}

// HandWords say which way to wind, and why that way.
func HandWords(d *models.Design) []string {
	h := d.Handedness
	words := []string{
		fmt.Sprintf("Wind it %s-handed: %s.", h, threadWord(h)),
		fmt.Sprintf("Seen from the open end, looking at the plate, the wire runs %s as it comes towards you.", rotation(h)),
	}
	if d.FeedsReflector {
		words = append(words, fmt.Sprintf("The hand is %s because the antenna feeds a reflector, which reverses the sense: it radiates %s-hand circular, and %s-hand leaves the reflector.", h, h, -h))
	} else {
		words = append(words, fmt.Sprintf("It radiates %s-hand circular forward (IEEE Std 145), with no reflector in between.", h))
	}
	if d.Wanted() == -h {
		words = append(words, fmt.Sprintf("CAUTION: the design file wants %s-hand circular, which this winding does not radiate. Ask before winding.", d.Wanted()))
	}
	return words
}

// sentence makes a sentence of a clause.
func sentence(s string) string {
	first, n := utf8.DecodeRuneInString(s)
	return string(unicode.ToUpper(first)) + s[n:] + "."
}

// Cautions are what a workshop and an operator must be told, in the README's
// own words.
var Cautions = []string{
	"These cautions are not complete. Local codes and licensed practice decide; predictions here are no structural, safety or clearance certificate.",
	"Radio-frequency exposure: keep people out of the beam when transmitting. Licence and radiated power are the operator's duty.",
	"Lightning: bond and arrest by the local electrical code.",
	"Power lines and height: keep clear of lines by more than the length of mast and antenna; work at height only as trained.",
	"Wire ends and springs: a wound conductor stores energy and its open end is at eye level. Cap it.",
	"A bare winding burns at power: switch the transmitter off and lock it before trimming.",
}
