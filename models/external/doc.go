// Package external lets another program answer as a simulator: in whatever
// language, with whatever method, as long as it reads questions from its
// standard input and writes answers to its standard output.
//
// # The protocol, version 1
//
// Every message is one JSON object on one line, UTF-8, ended by a line feed.
// Numbers are SI and finite: NaN and infinities are no JSON. A program has to
// flush its output after every line. What it writes to standard error is its
// log; the last lines of it stand in the error where something goes wrong.
//
// The program speaks first, within 30 seconds, and once:
//
//	{"protocol":1,"name":"invented","version":"1"}
//
//	protocol    1
//	name        up to 100 bytes
//	version     up to 100 bytes; it must change whenever an answer may,
//	            since answers are kept and used again under name, version
//	            and command
//	outputs     optional list of what it can answer beside the axis: cone,
//	            cuts, balance, spread, pattern
//	statement   optional sentence on what the model is and what it is worth
//	indicative  optional; true where impedances and axial ratios are rules of
//	            thumb that no aim or limit should stand on unasked
//
// Then it is asked one question at a time:
//
//	{"id":7,"design":{…},"hz":[1.66e9,1.68e9],"outputs":["axis","cone"],"cone_rad":0.26}
//
//	id        a whole number
//	design    the antenna: the keys of a design file with their units
//	          (turns, diameter_m, spacing_m, handedness, conductor, feed,
//	          ground, …), laws as lists, defaults filled in, without title,
//	          band, names of stock and material; a ground of kind disc or cup
//	          with diameter_m, rim_m, thickness_m and its metal
//	hz        the frequencies, rising
//	outputs   what is asked: axis always, else what the hello offered
//	cone_rad  the half-angle of the cone, where that is asked
//
// and gives one line for it, with the same id: samples, or an error in words,
// which makes the design a failure with that reason.
//
//	{"id":7,"samples":[{…},{…}],"warnings":["the plate is taken as infinite"]}
//	{"id":7,"error":"the mesh does not close"}
//
// There is one sample for each frequency, in order, with the keys under which
// a [models.Sample] is kept. Gains and directivities are power ratios, not
// decibels.
//
//	hz                   as asked
//	port_ohm             [resistance, reactance] at the plane
//	input_ohm            optional: the same at the connector; else worked out
//	                     from port_ohm and the design's transformer
//	gain                 {"right":…,"left":…} partial gains on the axis,
//	                     conductor loss counted, mismatch not
//	axial_ratio_db       optional, 0 to 60; it has to agree with gain
//	sense                optional: 1 right, −1 left, 0 from 30 dB of axial
//	                     ratio; it has to agree with gain
//	directivity          total, on the axis
//	efficiency           0 to 1
//	cone_axial_ratio_db  cone: {"right":…,"left":…} highest over the cone for
//	                     each wanted sense; 60 where the other one prevails
//	edge_gain            cone: {"right":…,"left":…} lowest over the cone
//	peak_directivity     cuts: highest of any direction
//	beamwidth_rad        cuts: half-power, mean over the planes
//	sidelobe_db          cuts: −60 to 0, below the peak
//	rear_gain            cuts, optional: highest within 30° of the rear axis
//	power_balance        balance: (radiated + lost) / accepted
//	spread_port_ohm      spread: port_ohm with the voltage along the riser
//	pattern              pattern: [{"plane_rad":…,"rays":[{"angle_rad":…,
//	                     "gain":{…}},…]},…]; axial_ratio_db optional
//
// The keys of an output that was not asked may be there and are not looked
// at; any other key is an error. So are a missing key, a number out of range,
// a number of samples that is not that of the frequencies.
//
// A program may be started several times side by side, by its command alone
// and in the folder of whoever starts it. At the end of its input it has a
// second to end; it may be killed at any time, together with every process of
// its group. One that takes too long over a question is killed and the
// question counts as timed out. One that ends, writes a line that answers
// another question or none, or a line of more than 16 MB, is replaced and the
// question asked once more; if that ends alike, the question has failed. The
// same question must always get the same answer, whatever was asked before.
//
// The file examples/invented.py is a whole simulator in Python.
package external
