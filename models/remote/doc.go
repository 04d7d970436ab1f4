// Package remote is other machines as a simulator. A search hands its
// questions to a queue, workers take them, answer with models of their own
// and send the answers back; a [Simulator] is a wrapper with the interface of
// the one it stands for, and nothing around it knows the difference.
//
// The queue is a JetStream stream, kept in memory, of a NATS server: one that
// [Serve] embeds in the search, or one that is there already. It holds no
// truth: a question lies there until it is answered, and whoever asked asks
// again until it is, so that losing the queue, a worker or an answer costs
// time and nothing else.
//
// Subjects, all under turnwise.1:
//
//	ask.MODEL.KEY   a question; MODEL and KEY are digests of the model's
//	                identity and of the question with it. The stream takes
//	                each once, until it is answered
//	answer.KEY      its answer, to whoever asked
//	hello           a worker presents itself, every second; every search
//	                welcomes it, or refuses it with its reason
//
// A worker holds a question under a lease that it renews while it simulates.
// When the lease runs out, since the worker has vanished, the question is
// handed out again. Answers are known by their question's key: the first one
// counts, and a late duplicate is dropped.
//
// Equal identities promise equal answers, so a worker answers only what is
// asked of an identity that it has to the letter.
//
// Any address but loopback demands a token and TLS: see [Access]. Whoever
// holds the token is trusted with the queue and with the truth of answers.
package remote
