package main

import "context"

// A need is one thing that a task wants from the system, how to see whether it is there, and what each package
// manager calls the package that brings it.
type need struct {
	what     string
	probes   []probe           // one that holds is enough
	packages map[string]string // by the packager's name
}

// A probe reports whether one sign of a need is present on the host.
type probe func(context.Context, host) bool

// program holds where the program is on PATH.
func program(name string) probe {
	return func(_ context.Context, h host) bool { return h.Has(name) }
}

// module holds where pkg-config knows the library.
func module(name string) probe {
	return func(ctx context.Context, h host) bool {
		if !h.Has("pkg-config") {
			return false
		}
		_, err := h.Read(ctx, call{args: []string{"pkg-config", "--exists", name}})
		return err == nil
	}
}

// header holds where the C header lies in a folder that every C compiler searches.
func header(name string) probe {
	return func(_ context.Context, h host) bool {
		return h.Exists("/usr/include/"+name) || h.Exists("/usr/local/include/"+name)
	}
}

// file holds where a file matches the glob pattern.
func file(pattern string) probe {
	return func(_ context.Context, h host) bool { return h.Exists(pattern) }
}

// on names the packages in the order of the four packagers: apt-get, dnf, pacman, zypper.
func on(apt, dnf, pacman, zypper string) map[string]string {
	return map[string]string{"apt-get": apt, "dnf": dnf, "pacman": pacman, "zypper": zypper}
}

// windowNeeds is what the desktop toolkit's build needs on Linux, and a renderer for screens without a graphics card.
// The OpenGL binding asks pkg-config for gl; the window library includes the X11 headers directly.
var windowNeeds = []need{
	{"pkg-config, which finds libraries for the compiler", []probe{program("pkg-config")},
		on("pkg-config", "pkgconf-pkg-config", "pkgconf", "pkg-config")},
	{"OpenGL headers", []probe{module("gl")},
		on("libgl1-mesa-dev", "mesa-libGL-devel", "libglvnd", "Mesa-libGL-devel")},
	{"X11 headers", []probe{module("x11"), header("X11/Xlib.h")},
		on("libx11-dev", "libX11-devel", "libx11", "libX11-devel")},
	{"X11 pointer headers", []probe{module("xcursor"), header("X11/Xcursor/Xcursor.h")},
		on("libxcursor-dev", "libXcursor-devel", "libxcursor", "libXcursor-devel")},
	{"X11 screen size headers", []probe{module("xrandr"), header("X11/extensions/Xrandr.h")},
		on("libxrandr-dev", "libXrandr-devel", "libxrandr", "libXrandr-devel")},
	{"X11 several-screen headers", []probe{module("xinerama"), header("X11/extensions/Xinerama.h")},
		on("libxinerama-dev", "libXinerama-devel", "libxinerama", "libXinerama-devel")},
	{"X11 input headers", []probe{module("xi"), header("X11/extensions/XInput2.h")},
		on("libxi-dev", "libXi-devel", "libxi", "libXi-devel")},
	{"X11 video mode headers", []probe{module("xxf86vm"), header("X11/extensions/xf86vmode.h")},
		on("libxxf86vm-dev", "libXxf86vm-devel", "libxxf86vm", "libXxf86vm-devel")},
	{"an OpenGL renderer", []probe{
		file("/usr/lib*/dri/*_dri.so"), file("/usr/lib/*/dri/*_dri.so"),
		file("/usr/lib*/libgallium*"), file("/usr/lib/*/libgallium*"),
		file("/run/opengl-driver"), file("/proc/driver/nvidia/version")},
		on("libgl1-mesa-dri", "mesa-dri-drivers", "mesa", "Mesa-dri")},
}

// testNeeds is what the window test needs on Linux besides windowNeeds.
var testNeeds = []need{
	{"a screen in memory", []probe{program("Xvfb")},
		on("xvfb", "xorg-x11-server-Xvfb", "xorg-server-xvfb", "xorg-x11-server-Xvfb")},
	{"a hand for the pointer", []probe{program("xdotool")},
		on("xdotool", "xdotool", "xdotool", "xdotool")},
	{"an eye for the screen", []probe{program("import")},
		on("imagemagick", "ImageMagick", "imagemagick", "ImageMagick")},
}

// holds reports whether one of the need's probes finds it.
func (n need) holds(ctx context.Context, h host) bool {
	for _, found := range n.probes {
		if found(ctx, h) {
			return true
		}
	}
	return false
}

// missing returns the needs that no probe finds, in their order.
func missing(ctx context.Context, h host, needs []need) []need {
	var out []need
	for _, n := range needs {
		if !n.holds(ctx, h) {
			out = append(out, n)
		}
	}
	return out
}
