package external

// guarded says that Guard was called, without which nothing may be started.
var guarded bool

// Guard is the first call of main, before flags or anything else is looked
// at, in every program that uses this package; a test binary calls it first
// in TestMain. In an ordinary start it does next to nothing and returns.
//
// On Unix a simulator is started by a second copy of the running binary,
// which Guard turns into a guard: it never returns there. The guard leads the
// process group in which the simulator runs, and holds the end of a pipe
// whose other end only this program has. When that closes, however this
// program ended, the guard kills the group. On Windows the running program
// joins a job whose members end with it.
func Guard() {
	guarded = true
	guard()
}
