package part

import (
	"slices"
	"strings"
)

// undecorated returns the forms under which a part may be found whose model
// carries the marks that model files hang on, nearest form first; name is in
// upper case. What is taken off:
//
//   - the path of a copied model (Q6.QABC)
//   - in front X, D, Q, DN or DI_
//   - behind a maker or a condition after / or _ (/NS, /FAI, _IR, _K, /75C)
//   - behind a voltage class after - (-800)
//
// Nothing else is: a letter or a digit more is another part. An underscore may
// also stand for a hyphen or a slash, which many readers do not take in a name.
func undecorated(name string) []string {
	forms := []string{name}
	for i := 0; i < len(forms) && len(forms) < 40; i++ {
		for _, form := range plainer(forms[i]) {
			if len(form) > 2 && !slices.Contains(forms, form) {
				forms = append(forms, form)
			}
		}
	}
	return forms[1:]
}

// plainer returns the forms of a name with one mark less.
func plainer(name string) []string {
	var forms []string
	if i := strings.IndexByte(name, '_'); i > 0 {
		forms = append(forms, strings.ReplaceAll(name, "_", "-"))
	}
	if i := strings.LastIndexByte(name, '.'); i >= 0 {
		forms = append(forms, name[i+1:])
	}
	for _, prefix := range []string{"DI_", "DI-", "DN", "X", "D", "Q"} {
		if rest, ok := strings.CutPrefix(name, prefix); ok {
			forms = append(forms, rest)
		}
	}
	if i := strings.LastIndexAny(name, "/_"); i > 0 && isMaker(name[i+1:]) {
		forms = append(forms, name[:i])
	}
	if i := strings.LastIndexByte(name, '-'); i > 0 && isVoltage(name[i+1:]) {
		forms = append(forms, name[:i])
	}
	return forms
}

// isMaker reports whether a suffix is letters (a maker, a package, a grade) or a
// temperature, and not the rest of a part number.
func isMaker(suffix string) bool {
	if digits, ok := strings.CutSuffix(suffix, "C"); ok && digits != "" && allDigits(digits) {
		return true
	}
	for i := 0; i < len(suffix); i++ {
		if suffix[i] < 'A' || suffix[i] > 'Z' {
			return false
		}
	}
	// A single letter is a class of the part (C106_D), but for the customary _K.
	return suffix == "K" || len(suffix) >= 2 && len(suffix) <= 5
}

// isVoltage reports whether a suffix is a blocking voltage.
func isVoltage(suffix string) bool { return len(suffix) >= 2 && len(suffix) <= 4 && allDigits(suffix) }

func allDigits(s string) bool {
	for i := 0; i < len(s); i++ {
		if s[i] < '0' || s[i] > '9' {
			return false
		}
	}
	return true
}
