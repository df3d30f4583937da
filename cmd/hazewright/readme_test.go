package main

import (
	"bytes"
	"context"
	"os"
	"strings"
	"testing"
)

// The assessment shown in the README is what the program prints: every line of the block,
// in order, where "..." stands for lines left out.
func TestReadmeShowsWhatTheProgramPrints(t *testing.T) {
	readme, err := os.ReadFile("../../README.md")
	if err != nil {
		t.Fatal(err)
	}
	const command = "$ hazewright assess examples/lantern-basin/study.yaml\n"
	_, block, ok := strings.Cut(string(readme), command)
	if !ok {
		t.Fatalf("the README has no block that starts with %q", command)
	}
	block, _, _ = strings.Cut(block, "```")

	var out, errs bytes.Buffer
	if code := run(context.Background(), []string{"assess", "../../examples/lantern-basin/study.yaml"}, strings.NewReader(""), &out, &errs); code != 0 {
		t.Fatalf("exit %d: %s", code, errs.String())
	}
	printed := strings.Split(out.String(), "\n")
	at, shown := 0, 0
	for _, want := range strings.Split(strings.TrimSpace(block), "\n") {
		if want == "..." {
			continue
		}
		shown++
		for at < len(printed) && strings.TrimRight(printed[at], " ") != want {
			at++
		}
		if at == len(printed) {
			t.Fatalf("the README shows a line that the program does not print there:\n%s", want)
		}
		at++
	}
	if shown < 30 {
		t.Errorf("only %d lines of the table are shown", shown)
	}
}
