package register

import (
	"bufio"
	"context"
	"fmt"
	"os"
	"os/exec"
	"strconv"
	"testing"
)

// The environment that makes the test binary a program that adds batches.
const (
	writerWhere = "REGISTER_TEST_WHERE"
	writerName  = "REGISTER_TEST_NAME"
	writerCount = "REGISTER_TEST_COUNT"
)

// writer adds batches and prints the number of each when it is confirmed.
func writer() {
	count, _ := strconv.Atoi(os.Getenv(writerCount))
	r, err := Open(os.Getenv(writerWhere))
	if err != nil {
		fmt.Fprintln(os.Stderr, err)
		os.Exit(1)
	}
	for i := range count {
		id, err := r.Add(context.Background(), example(fmt.Sprintf("%s-%d", os.Getenv(writerName), i)))
		if err != nil {
			fmt.Fprintln(os.Stderr, err)
			os.Exit(1)
		}
		fmt.Println(id)
	}
}

// child is a writer in a process of its own.
type child struct {
	command *exec.Cmd
	lines   *bufio.Scanner
	batches map[int64]string // what it confirmed
	name    string
}

func start(t *testing.T, where, name string, count int) *child {
	t.Helper()
	c := exec.Command(os.Args[0], "-test.run=^$")
	c.Env = append(os.Environ(), writerWhere+"="+where, writerName+"="+name, fmt.Sprintf("%s=%d", writerCount, count))
	c.Stderr = os.Stderr
	out, err := c.StdoutPipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := c.Start(); err != nil {
		t.Fatal(err)
	}
	return &child{c, bufio.NewScanner(out), map[int64]string{}, name}
}

// read takes down one confirmation; false at the end.
func (c *child) read(t *testing.T) bool {
	if !c.lines.Scan() {
		return false
	}
	id, err := strconv.ParseInt(c.lines.Text(), 10, 64)
	if err != nil {
		t.Fatal(err)
	}
	c.batches[id] = fmt.Sprintf("%s-%d", c.name, len(c.batches))
	return true
}
