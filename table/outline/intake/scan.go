package intake

import (
	"math"
	"strconv"
)

// scanner reads numbers and flags out of path data and lists: separated by
// white space, commas, or nothing where a sign or a point tells them apart.
type scanner struct {
	text string
	at   int
}

func (s *scanner) space() {
	comma := false
	for s.at < len(s.text) {
		switch s.text[s.at] {
		case ' ', '\t', '\r', '\n', '\f':
		case ',':
			if comma {
				return
			}
			comma = true
		default:
			return
		}
		s.at++
	}
}

func (s *scanner) done() bool {
	s.space()
	return s.at >= len(s.text)
}

// number reads one number; false where none stands there.
func (s *scanner) number() (float64, bool) {
	s.space()
	i := s.at
	sign := func() {
		if i < len(s.text) && (s.text[i] == '+' || s.text[i] == '-') {
			i++
		}
	}
	digits := func() int {
		from := i
		for i < len(s.text) && s.text[i] >= '0' && s.text[i] <= '9' {
			i++
		}
		return i - from
	}
	sign()
	n := digits()
	if i < len(s.text) && s.text[i] == '.' {
		i++
		n += digits()
	}
	if n == 0 {
		return 0, false
	}
	if i < len(s.text) && (s.text[i] == 'e' || s.text[i] == 'E') {
		back := i
		i++
		sign()
		if digits() == 0 {
			i = back // the e of a unit, such as em
		}
	}
	x, err := strconv.ParseFloat(s.text[s.at:i], 64)
	if err != nil || math.IsInf(x, 0) {
		return 0, false
	}
	s.at = i
	return x, true
}

// flag reads a 0 or a 1, which may stand against what follows.
func (s *scanner) flag() (bool, bool) {
	s.space()
	if s.at < len(s.text) && (s.text[s.at] == '0' || s.text[s.at] == '1') {
		s.at++
		return s.text[s.at-1] == '1', true
	}
	return false, false
}

// numbers reads a list that holds nothing else.
func numbers(text string) ([]float64, error) {
	s := scanner{text: text}
	var list []float64
	for !s.done() {
		x, ok := s.number()
		if !ok {
			return list, fault("%q is no list of numbers.", short(text))
		}
		list = append(list, x)
	}
	return list, nil
}
