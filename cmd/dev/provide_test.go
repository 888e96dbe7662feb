package main

import (
	"slices"
	"strings"
	"testing"
)

const (
	aptUpdate  = "apt-get update"
	aptInstall = "env DEBIAN_FRONTEND=noninteractive apt-get -o DPkg::Lock::Timeout=120 install -y --no-install-recommends"
	allWindow  = " pkg-config libgl1-mesa-dev libx11-dev libxcursor-dev libxrandr-dev libxinerama-dev libxi-dev libxxf86vm-dev libgl1-mesa-dri"
)

func TestBareDebianRefreshesThenInstallsEverything(t *testing.T) {
	f := bareDebian()
	s, said := siteOn(t, f)
	if err := s.provide(t.Context(), windowNeeds); err != nil {
		t.Fatal(err)
	}
	want := []string{aptUpdate, aptInstall + allWindow}
	if !slices.Equal(f.ran, want) {
		t.Errorf("ran\n%s\nwant\n%s", strings.Join(f.ran, "\n"), strings.Join(want, "\n"))
	}
	for _, line := range want {
		if !strings.Contains(said.String(), "+ "+line+"\n") {
			t.Errorf("the command %q was not printed:\n%s", line, said)
		}
	}
}

func TestReadyMachineIsLeftAlone(t *testing.T) {
	f := readyDebian()
	s, said := siteOn(t, f)
	s.isRoot = false
	if err := s.provide(t.Context(), append(slices.Clone(windowNeeds), testNeeds...)); err != nil {
		t.Fatal(err)
	}
	if len(f.ran) > 0 || said.Len() > 0 {
		t.Errorf("ran %q and said %q on a machine that lacks nothing", f.ran, said)
	}
}

// Each need is found missing when it alone is absent, and its package is the only one asked for.
func TestEachNeedIsAskedForAlone(t *testing.T) {
	for _, n := range append(slices.Clone(windowNeeds), testNeeds...) {
		apt := n.packages["apt-get"]
		f := readyDebian()
		f.files = append(f.files, "/var/lib/apt/lists/*_Packages*",
			"/usr/include/X11/Xlib.h", "/usr/include/X11/Xcursor/Xcursor.h", "/usr/include/X11/extensions/Xrandr.h",
			"/usr/include/X11/extensions/Xinerama.h", "/usr/include/X11/extensions/XInput2.h", "/usr/include/X11/extensions/xf86vmode.h")
		lose(f, apt)
		s, _ := siteOn(t, f)
		if err := s.provide(t.Context(), append(slices.Clone(windowNeeds), testNeeds...)); err != nil {
			t.Fatal(err)
		}
		want := aptInstall + " " + apt
		if apt == "pkg-config" {
			want += " libgl1-mesa-dev" // without pkg-config nothing tells whether OpenGL is there
		}
		if !slices.Equal(f.ran, []string{want}) {
			t.Errorf("without %s: ran %q, want %q", apt, f.ran, want)
		}
	}
}

// lose takes from a ready machine what a Debian package brings.
func lose(f *fakeHost, apt string) {
	traces := map[string][]string{
		"pkg-config": {"pkg-config"}, "libgl1-mesa-dev": {"gl"}, "libx11-dev": {"x11", "/usr/include/X11/Xlib.h"},
		"libxcursor-dev": {"xcursor", "/usr/include/X11/Xcursor/Xcursor.h"}, "libxrandr-dev": {"xrandr", "/usr/include/X11/extensions/Xrandr.h"},
		"libxinerama-dev": {"xinerama", "/usr/include/X11/extensions/Xinerama.h"}, "libxi-dev": {"xi", "/usr/include/X11/extensions/XInput2.h"},
		"libxxf86vm-dev": {"xxf86vm", "/usr/include/X11/extensions/xf86vmode.h"}, "libgl1-mesa-dri": {"/usr/lib/*/dri/*_dri.so"},
		"xvfb": {"Xvfb"}, "xdotool": {"xdotool"}, "imagemagick": {"import"},
	}[apt]
	gone := func(name string) bool { return slices.Contains(traces, name) }
	f.programs = slices.DeleteFunc(f.programs, gone)
	f.modules = slices.DeleteFunc(f.modules, gone)
	f.files = slices.DeleteFunc(f.files, gone)
}

func TestWhoMayInstall(t *testing.T) {
	const lists = "/var/lib/apt/lists/*_Packages*"
	xvfb := testNeeds[:1]
	cases := []struct {
		name     string
		isRoot   bool
		terminal bool
		sudo     bool
		fails    []string
		ran      []string
		refusal  string // what the error contains
	}{
		{name: "root", isRoot: true, sudo: true, ran: []string{aptInstall + " xvfb"}},
		{name: "sudo without a password", sudo: true, ran: []string{"sudo -n " + aptInstall + " xvfb"}},
		{name: "sudo with a password, at a terminal", sudo: true, terminal: true, fails: []string{"sudo -n"}, ran: []string{"sudo " + aptInstall + " xvfb"}},
		{name: "sudo with a password, no terminal", sudo: true, fails: []string{"sudo -n"},
			refusal: "\n    sudo apt-get update && sudo " + aptInstall + " xvfb"},
		{name: "no sudo", terminal: true, refusal: "\n    su -c 'apt-get update && " + aptInstall + " xvfb'"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			f := bareDebian()
			f.files, f.fails = []string{lists}, c.fails
			if c.sudo {
				f.programs = append(f.programs, "sudo")
			}
			s, _ := siteOn(t, f)
			s.isRoot, s.hasTerminal = c.isRoot, c.terminal
			err := s.provide(t.Context(), xvfb)
			if !slices.Equal(f.ran, c.ran) {
				t.Errorf("ran %q, want %q", f.ran, c.ran)
			}
			if (err != nil) != (c.refusal != "") || err != nil && !strings.HasSuffix(err.Error(), c.refusal) {
				t.Errorf("error %v, want one that ends with %q", err, c.refusal)
			}
		})
	}
}

func TestStaleListIsFetchedAndTheInstallationRepeated(t *testing.T) {
	f := bareDebian()
	f.files = []string{"/var/lib/apt/lists/*_Packages*"}
	f.failOnce = []string{"install"}
	s, _ := siteOn(t, f)
	if err := s.provide(t.Context(), testNeeds[1:2]); err != nil {
		t.Fatal(err)
	}
	want := []string{aptInstall + " xdotool", aptUpdate, aptInstall + " xdotool"}
	if !slices.Equal(f.ran, want) {
		t.Errorf("ran %q, want %q", f.ran, want)
	}
}

// A source that cannot be reached does not matter where the packages come from another one.
func TestFailedRefreshIsNotFatal(t *testing.T) {
	f := bareDebian()
	f.fails = []string{"update"}
	s, _ := siteOn(t, f)
	if err := s.provide(t.Context(), testNeeds); err != nil {
		t.Fatal(err)
	}
	if len(f.ran) != 2 {
		t.Errorf("ran %q, want the refresh and the installation", f.ran)
	}
}

func TestFailedInstallationNamesTheLineToRun(t *testing.T) {
	f := bareDebian()
	f.fails = []string{"install"}
	s, _ := siteOn(t, f)
	err := s.provide(t.Context(), testNeeds[:1])
	if err == nil || !strings.Contains(err.Error(), "apt-get could not install them") || !strings.Contains(err.Error(), aptInstall+" xvfb") {
		t.Errorf("error %v does not say what failed and what to run", err)
	}
}

func TestOtherPackageManagers(t *testing.T) {
	needs := []need{windowNeeds[1], testNeeds[0]}
	for program, want := range map[string]string{
		"dnf":    "dnf install -y --setopt=install_weak_deps=False mesa-libGL-devel xorg-x11-server-Xvfb",
		"pacman": "pacman -S --needed --noconfirm libglvnd xorg-server-xvfb",
		"zypper": "zypper --non-interactive install --no-recommends Mesa-libGL-devel xorg-x11-server-Xvfb",
	} {
		f := &fakeHost{programs: []string{program}}
		s, _ := siteOn(t, f)
		if err := s.provide(t.Context(), needs); err != nil {
			t.Fatal(err)
		}
		if !slices.Equal(f.ran, []string{want}) {
			t.Errorf("ran %q, want %q", f.ran, want)
		}
	}
}

func TestUnknownSystemNamesThePackages(t *testing.T) {
	s, _ := siteOn(t, &fakeHost{})
	err := s.provide(t.Context(), testNeeds)
	if err == nil || !strings.Contains(err.Error(), "xvfb, xdotool, imagemagick") {
		t.Errorf("error %v does not name what to install", err)
	}
}

func TestEveryNeedHasAPackageEverywhere(t *testing.T) {
	for _, n := range append(slices.Clone(windowNeeds), testNeeds...) {
		for _, p := range packagers {
			if n.packages[p.name] == "" {
				t.Errorf("%s has no package for %s", n.what, p.name)
			}
		}
	}
}

func TestWhatTheInstallationDidNotBringIsSaid(t *testing.T) {
	f := bareDebian()
	f.brings = map[string][]string{" xvfb": {"Xvfb"}}
	s, said := siteOn(t, f)
	if err := s.provide(t.Context(), testNeeds[:2]); err != nil {
		t.Fatal(err)
	}
	if text := said.String(); !strings.Contains(text, "not found where it is looked for: a hand for the pointer.") {
		t.Errorf("said %q, but xdotool is still absent and Xvfb is there", text)
	}
}

func TestCheckCompiler(t *testing.T) {
	cases := []struct {
		name  string
		alter func(*fakeHost, *site)
		want  string // part of the error; "" for none
	}{
		{"works", func(*fakeHost, *site) {}, ""},
		{"with flags in CC", func(f *fakeHost, _ *site) { f.says["go env CC"] = "gcc -m64" }, ""},
		{"absent", func(f *fakeHost, _ *site) { f.programs = []string{"apt-get"} }, "looked for gcc"},
		{"absent on Debian", func(f *fakeHost, _ *site) { f.programs = []string{"apt-get"} }, "`apt-get install gcc libc6-dev`"},
		{"absent on an unknown system", func(f *fakeHost, _ *site) { f.programs = nil }, "install gcc and the C library's headers"},
		{"absent on macOS", func(f *fakeHost, s *site) { f.programs, s.goos = nil, "darwin" }, "xcode-select --install"},
		{"without the C library", func(f *fakeHost, _ *site) {
			f.fails = []string{"-fsyntax-only"}
			f.says["-fsyntax-only"] = "<stdin>:1:10: fatal error: stdlib.h: No such file or directory\ncompilation terminated."
		}, "(<stdin>:1:10: fatal error: stdlib.h: No such file or directory)"},
		{"go fails", func(f *fakeHost, _ *site) { f.fails = []string{"go env"} }, "`go env CC`"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			f := bareDebian()
			s, _ := siteOn(t, f)
			c.alter(f, s)
			err := s.checkCompiler(t.Context())
			if (err == nil) != (c.want == "") || err != nil && !strings.Contains(err.Error(), c.want) {
				t.Errorf("error %v, want one with %q", err, c.want)
			}
		})
	}
}
