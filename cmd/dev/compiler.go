package main

import (
	"context"
	"fmt"
	"strings"
)

// trialProgram includes a header of the C library, which some systems package apart from the compiler.
const trialProgram = "#include <stdlib.h>\nint main(void) { return EXIT_SUCCESS; }\n"

// compilerSource says where a C compiler comes from, by operating system or package manager.
var compilerSource = map[string]string{
	"darwin":  "run `xcode-select --install`",
	"windows": "install gcc, for example from MSYS2, and put its bin folder on PATH",
	"apt-get": "install it with `apt-get install gcc libc6-dev`",
	"dnf":     "install it with `dnf install gcc glibc-devel`",
	"pacman":  "install it with `pacman -S gcc`",
	"zypper":  "install it with `zypper install gcc glibc-devel`",
}

// checkCompiler makes sure that the C compiler which Go would call is there and works.
func (s *site) checkCompiler(ctx context.Context) error {
	out, err := s.Read(ctx, call{args: []string{"go", "env", "CC"}, dir: s.root})
	words := strings.Fields(out)
	if err != nil || len(words) == 0 {
		return fmt.Errorf("the command `go env CC`, which names the C compiler, failed: %s", firstLine(out))
	}
	if !s.Has(words[0]) {
		return fmt.Errorf("no C compiler was found (looked for %s), and the window toolkit is partly written in C; %s, then run this again", words[0], s.compilerAdvice())
	}
	trial := call{args: append(words, "-x", "c", "-fsyntax-only", "-"), input: trialProgram}
	if out, err := s.Read(ctx, trial); err != nil {
		return fmt.Errorf("the C compiler %s cannot compile a small program (%s); %s, then run this again", words[0], firstLine(out), s.compilerAdvice())
	}
	return nil
}

func (s *site) compilerAdvice() string {
	key := s.goos
	if p, ok := packagerOn(s); ok && s.goos == "linux" {
		key = p.name
	}
	if advice, ok := compilerSource[key]; ok {
		return advice
	}
	return "install gcc and the C library's headers"
}

func firstLine(text string) string {
	line, _, _ := strings.Cut(text, "\n")
	return line
}
