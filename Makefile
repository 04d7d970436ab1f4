# What a developer runs. The README's test command is `make test`.
GO ?= go

.PHONY: build test race lint bench cover fuzz clean

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

# Every benchmark once; figures that matter are reported as metrics.
bench:
	$(GO) test -run '^$$' -bench . -benchtime 1x -timeout 60m ./...

# Line coverage of the rooms that are held to 90 %.
cover:
	.ci/cover

# A minute of fuzzing for each fuzz target of the files people write.
fuzz:
	for f in $$($(GO) test -list '^Fuzz' ./configs | grep ^Fuzz); do $(GO) test -run '^$$' -fuzz "^$$f$$" -fuzztime 60s ./configs || exit 1; done

clean:
	rm -f turnwise cover.out
