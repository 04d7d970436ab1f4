package remote

import (
	"context"
	"crypto/tls"
	"errors"
	"fmt"
	"net"
	"time"

	"github.com/nats-io/nats.go"
)

// How often a queue that is away is looked for.
const retryEvery = 250 * time.Millisecond

// dial connects to a queue and waits for one that is not there yet; a queue
// that refuses is an error. A connection that is lost later comes back by
// itself.
func dial(ctx context.Context, address string, a Access, say func(string), more ...nats.Option) (*nats.Conn, error) {
	options, err := options(address, a)
	if err != nil {
		return nil, err
	}
	for first := true; ; first = false {
		nc, err := nats.Connect(address, append(options, more...)...)
		switch {
		case err == nil:
			return nc, nil
		case final(err):
			return nil, fmt.Errorf("the queue at %s: %w", address, plainly(err))
		case first:
			say(fmt.Sprintf("no queue at %s yet (%v); waiting for it", address, err))
		}
		select {
		case <-ctx.Done():
			return nil, ctx.Err()
		case <-time.After(retryEvery):
		}
	}
}

// options are how a client connects.
func options(address string, a Access) ([]nats.Option, error) {
	secure, err := readURL(address, a)
	if err != nil {
		return nil, err
	}
	token, tokenErr := a.token()
	config, tlsErr := a.clientTLS()
	if err := errors.Join(tokenErr, tlsErr); err != nil {
		return nil, err
	}
	options := append(lasting(), nats.Token(token))
	if secure {
		options = append(options, nats.Secure(config))
	}
	return options, nil
}

// lasting makes a connection come back for as long as it takes.
func lasting() []nats.Option {
	return []nats.Option{
		nats.MaxReconnects(-1), nats.ReconnectWait(retryEvery), nats.ReconnectJitter(retryEvery, retryEvery),
		nats.PingInterval(5 * time.Second), nats.MaxPingsOutstanding(2),
		nats.ErrorHandler(func(*nats.Conn, *nats.Subscription, error) {}), // else they are printed
	}
}

// final reports whether asking again is of no use.
func final(err error) bool {
	for _, e := range []error{nats.ErrAuthorization, nats.ErrAuthExpired, nats.ErrAuthRevoked, nats.ErrSecureConnWanted} {
		if errors.Is(err, e) {
			return true
		}
	}
	var untrusted *tls.CertificateVerificationError
	var record tls.RecordHeaderError
	var alert *net.OpError // what a server says of our certificate
	return errors.As(err, &untrusted) || errors.As(err, &record) || errors.As(err, &alert) && alert.Op == "remote error"
}

// plainly says what a refusal means and what helps.
func plainly(err error) error {
	switch {
	case errors.Is(err, nats.ErrAuthorization):
		return fmt.Errorf("the token is missing or wrong; --token-file names the file with the one that the queue has (%w)", err)
	case errors.As(err, new(*tls.CertificateVerificationError)):
		return fmt.Errorf("it is not the one that is trusted; --tls-ca names the authority to know it by (%w)", err)
	case errors.Is(err, nats.ErrSecureConnWanted):
		return fmt.Errorf("it does not speak TLS, which is demanded here (%w)", err)
	}
	return err
}
