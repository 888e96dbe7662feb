package main

import (
	"context"
	"errors"
	"fmt"
	"path/filepath"
	"time"
)

// The build tags are fixed, since another tag may mean that the slow C part of the toolkit is compiled once more.
//
// gles (Linux) binds OpenGL ES, which compiles in a sixth of the time of the full OpenGL binding. no_emoji leaves out
// a font of 4 MB. migrated_fynedo drops the toolkit's check that each refresh comes from its own thread, which makes a
// refresh four times as fast; tests keep the check. It touches no file of the OpenGL binding or the window library, so
// what users run and what tests run share the compiled C part.
func testTags(goos string) string {
	if goos == "linux" {
		return "gles,no_emoji"
	}
	return "no_emoji"
}

func startTags(goos string) string { return testTags(goos) + ",migrated_fynedo" }

// designer is the path of the built designer.
func (s *site) designer() string {
	name := "cavitywright"
	if s.goos == "windows" {
		name += ".exe"
	}
	return filepath.Join(s.cacheDir, name)
}

// start builds the designer and runs it with the arguments.
func start(ctx context.Context, s *site, args []string) error {
	if err := s.prepare(ctx, windowNeeds); err != nil {
		return err
	}
	if err := s.buildDesigner(ctx); err != nil {
		return err
	}
	if s.goos == "linux" && s.Getenv("DISPLAY") == "" && s.Getenv("WAYLAND_DISPLAY") == "" {
		return fmt.Errorf("the designer is built (%s), but there is no screen to open it on: neither DISPLAY nor WAYLAND_DISPLAY is set; start it from a graphical session", s.designer())
	}
	err := s.Run(ctx, call{args: append([]string{s.designer()}, args...)})
	if err != nil && !errors.Is(err, errStopped) {
		return fmt.Errorf("the designer ended with a fault: %w", err)
	}
	return err
}

// prepare installs what is missing (on Linux; other systems bring it along) and checks the C compiler.
func (s *site) prepare(ctx context.Context, needs []need) error {
	if s.goos == "linux" {
		if err := s.provide(ctx, needs); err != nil {
			return err
		}
	}
	return s.checkCompiler(ctx)
}

// buildDesigner builds the designer as users run it.
func (s *site) buildDesigner(ctx context.Context) error {
	s.say("Building the designer. The first build takes two to five minutes, later ones a few seconds.")
	beat := startHeartbeat(s)
	err := s.Run(ctx, call{
		args: []string{"go", "build", "-buildvcs=false", "-tags", startTags(s.goos), "-o", s.designer(), "./cmd/cavitywright"},
		dir:  s.root,
		env:  withC,
	})
	took := beat.stop()
	if err != nil {
		return fmt.Errorf("the designer could not be built (%w); what the compiler said stands above", err)
	}
	s.say("Built in %s.", spoken(took))
	return nil
}

// spoken writes a duration in minutes and seconds.
func spoken(d time.Duration) string {
	sec := int(d.Round(time.Second) / time.Second)
	if sec < 60 {
		return fmt.Sprintf("%d s", sec)
	}
	return fmt.Sprintf("%d min %d s", sec/60, sec%60)
}
