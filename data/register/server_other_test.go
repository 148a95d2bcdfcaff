//go:build !unix

package register

import "testing"

// database skips the test: the server of the tests needs Unix sockets.
func database(t *testing.T) string {
	t.Skip("PostgreSQL is tested on Unix only")
	return ""
}

func stopServer() {}
