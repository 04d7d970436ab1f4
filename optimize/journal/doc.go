// Package journal keeps every evaluation of a search, and every decision a
// clock or a person made about it, in one SQLite file that survives the end
// of the process at any moment.
//
// A [Writer] appends groups: each call of [Writer.Record] is one transaction
// that has reached the disk when it returns (write-ahead log, synchronous
// FULL). A [Reader] may look on from another process meanwhile. The search
// itself is repeated from [Reader.Past]; answers of simulators are found
// again by the key of their question with [Reader.Answer]. Which search may
// write in a folder is settled by [Lock].
//
// # Schema, version 1
//
// The file is marked by application_id 0x54774A6C and user_version 1. All
// tables are STRICT. Times are microseconds since 1970-01-01 UTC. Rows are
// only ever added, except that an answer that failed may be answered later.
//
//	run         one row: brief (whole text), digest, program, seed, machine,
//	            created_us, and the JSON lists models (one identity a rung),
//	            variables, figures, aims, limits, whose order is the order
//	            of the numbered columns of evaluation
//	evaluation  one row per finished evaluation, in the order of finishing:
//	            seq, candidate, final (1: simulated again for the final
//	            front, outside the budget), rung, stage, status (ok, failed,
//	            timed out), reason, duration_ns, reused, finished_us,
//	            violation (sum of the unmet scaled limits, NULL unless ok),
//	            entered (1: nothing on record dominated it when it came),
//	            answers (JSON list of answer.id), parts (bit set of what the
//	            score held: 1 figures, 2 aims, 4 limits), and the numbers
//	            p1… (point), f1… (figures), a1… (aims, to be minimised),
//	            l1… (limits, met at ≤ 0)
//	answer      what one simulator said to one question: id, key (SHA-256 of
//	            the question), design (hash), model (→ model.id), response
//	            (JSON, NULL where the question was put but not answered).
//	            The same question is stored once. Not compressed: numbers
//	            of 17 digits shrink by half at the price of being read by
//	            no other program
//	model       id, identity
//	growth      how the front grew: evaluations (on record then, however they
//	            ended), front (members, of the finest rung), hypervolume
//	            (against reference; NULL with more than three aims),
//	            reference (JSON list: the worst of each aim that anything
//	            feasible had). After each evaluation at first, then after
//	            every fiftieth part more, and with every decision. A journal
//	            that was begun without it is given it when it is gone on with
//	decision    seq, kind (start, extension, stop, …), detail (JSON),
//	            evaluations (highest evaluation.seq before it), at_us
//
// Numbers are doubles, bit for bit: NULL stands for NaN, and the columns are
// of type ANY because a REAL column would lose the sign of a zero.
//
// # Views
//
// For people, with any SQLite client, also while a search runs:
//
//	evaluations  evaluation with the header's names: variables and figures
//	             under their own names (a choice as its text), aim_… and
//	             limit_… for the scaled values, feasible, model, design and
//	             question of the first answer, duration_s, finished (ISO)
//	front        the rows of evaluations that are feasible and not dominated:
//	             of the finest rung, and of what was simulated again by its
//	             last final figures; of equal rows the lowest candidate
//	answers      answer with the model's identity and the response as text
//	questions    which evaluation rested on which answer
//	decisions    decision with ISO times
//	failures     how often each reason was given
package journal
