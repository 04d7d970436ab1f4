# What a developer runs. The README's test command is `make test`.
GO ?= go

.PHONY: build test race lint bench cover fuzz diskfull clean

build:
	$(GO) build -o turnwise ./cmd/turnwise

test:
	$(GO) vet ./...
	$(GO) test ./...

race:
	$(GO) test -race ./...

lint:
	test -z "$$(gofmt -l .)" || { gofmt -l .; exit 1; }
	$(GO) vet ./...
	$(GO) run honnef.co/go/tools/cmd/staticcheck@v0.8.2 ./...

# Every benchmark: the searchers' once, since they report what they found; the
# others for as long as it takes to time them.
bench:
	$(GO) test -run '^$$' -bench . -benchtime 1x -timeout 60m ./optimize/genetic ./optimize/surrogate
	$(GO) test -run '^$$' -bench . -timeout 60m ./models/... ./optimize/journal

# Line coverage of the rooms that are held to 90 %.
cover:
	.ci/cover

# A minute of fuzzing for each fuzz target: files that people write, answers
# of other programs.
fuzz:
	for p in ./configs ./models/external ./cmd/internal/workshop; do \
		for f in $$($(GO) test -list '^Fuzz' $$p | grep ^Fuzz); do $(GO) test -run '^$$' -fuzz "^$$f$$" -fuzztime 60s $$p || exit 1; done; \
	done

# What a search does on a disk that fills up; mounts a small file system.
diskfull:
	$(GO) test -tags diskfull -run DiskFull -v ./cmd/turnwise

# The report in a real browser. Wants a Chromium on the path.
browser:
	$(GO) test -tags browser -run '^TestBrowser' ./cmd/turnwise

clean:
	rm -f turnwise cover.out
