package main

import (
	"context"
	"fmt"
	"strings"
)

// A packager is a system's package manager: what it is called and how it is asked.
type packager struct {
	name    string   // the program, and the key in need.packages
	install []string // the command that package names are appended to
	refresh []string // fetches the list of packages; nil where it is not asked to
	lists   string   // glob pattern of the fetched lists; none there means refresh first
}

// packagers in the order in which they are looked for. Some systems carry a second one that is not in use there, so
// the usual one comes first.
var packagers = []packager{
	{
		name: "apt-get",
		install: []string{"env", "DEBIAN_FRONTEND=noninteractive", "apt-get", "-o", "DPkg::Lock::Timeout=120",
			"install", "-y", "--no-install-recommends"},
		refresh: []string{"apt-get", "update"},
		lists:   "/var/lib/apt/lists/*_Packages*",
	},
	{name: "dnf", install: []string{"dnf", "install", "-y", "--setopt=install_weak_deps=False"}},
	// A new list without a full upgrade would leave a mixed system, so pacman is not asked for one.
	{name: "pacman", install: []string{"pacman", "-S", "--needed", "--noconfirm"}},
	{name: "zypper", install: []string{"zypper", "--non-interactive", "install", "--no-recommends"}},
}

// packagerOn returns the first packager that the host has.
func packagerOn(h host) (packager, bool) {
	for _, p := range packagers {
		if h.Has(p.name) {
			return p, true
		}
	}
	return packager{}, false
}

// installing returns the command that installs what the needs name.
func (p packager) installing(needs []need) []string {
	command := append([]string{}, p.install...)
	for _, n := range needs {
		command = append(command, n.packages[p.name])
	}
	return command
}

// asRoot returns the words before a command that changes the system, and whether this user may run one at all.
func (s *site) asRoot(ctx context.Context) (prefix []string, may bool) {
	switch {
	case s.isRoot:
		return nil, true
	case !s.Has("sudo"):
		return nil, false
	}
	if _, err := s.Read(ctx, call{args: []string{"sudo", "-n", "true"}}); err == nil {
		return []string{"sudo", "-n"}, true
	}
	// sudo asks for the password on the terminal itself, whatever standard input is.
	return []string{"sudo"}, s.hasTerminal
}

// line is the one line with which a person installs the needs by hand.
func (p packager) line(h host, needs []need) string {
	elevate := func(command []string) string {
		text := call{args: command}.String()
		if h.Has("sudo") {
			return "sudo " + text
		}
		return text
	}
	text := elevate(p.installing(needs))
	if p.refresh != nil {
		text = elevate(p.refresh) + " && " + text
	}
	if h.Has("sudo") {
		return text
	}
	return "su -c " + quoted(text)
}

// provide makes sure that the needs are met, asking the system's packager for those that are not.
func (s *site) provide(ctx context.Context, needs []need) error {
	lacking := missing(ctx, s, needs)
	if len(lacking) == 0 {
		return nil
	}
	s.say("This system lacks: %s.", names(lacking))
	p, ok := packagerOn(s)
	if !ok {
		return fmt.Errorf("this system has no package manager that this program knows; install by hand what Debian calls %s, then run this again",
			strings.Join(packagers[0].installing(lacking)[len(packagers[0].install):], ", "))
	}
	prefix, may := s.asRoot(ctx)
	if !may {
		return fmt.Errorf("installing them takes rights that this user does not have here; run this line, then run this again:\n\n    %s", p.line(s, lacking))
	}
	if err := s.askPackager(ctx, p, prefix, lacking); err != nil {
		return fmt.Errorf("%s could not install them (%w); run this line and see what it says:\n\n    %s", p.name, err, p.line(s, lacking))
	}
	if still := missing(ctx, s, lacking); len(still) > 0 {
		s.say("Installed, but not found where it is looked for: %s. Going on.", names(still))
	}
	return nil
}

// askPackager installs the needs. The list of packages is fetched first where there is none, and once more where the
// installation fails, since an old list names packages that are gone.
func (s *site) askPackager(ctx context.Context, p packager, prefix []string, needs []need) error {
	install := func() error { return s.announce(ctx, append(prefix[:len(prefix):len(prefix)], p.installing(needs)...)) }
	refresh := func() error { return s.announce(ctx, append(prefix[:len(prefix):len(prefix)], p.refresh...)) }
	if p.refresh == nil {
		return install()
	}
	if s.Exists(p.lists) {
		if err := install(); err == nil || ctx.Err() != nil {
			return err
		}
		s.say("That failed; fetching a new list of packages.")
	}
	if err := refresh(); err != nil {
		// One unreachable source fails the whole refresh, though the packages may well come from another.
		s.say("Not every list of packages could be fetched; trying all the same.")
	}
	return install()
}

// announce prints a command that changes the system, then runs it.
func (s *site) announce(ctx context.Context, command []string) error {
	c := call{args: command}
	s.say("+ %s", c)
	return s.Run(ctx, c)
}

// names lists needs for a sentence.
func names(needs []need) string {
	words := make([]string, len(needs))
	for i, n := range needs {
		words[i] = n.what
	}
	return strings.Join(words, "; ")
}
