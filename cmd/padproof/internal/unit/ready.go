package unit

import (
	"path/filepath"
	"strings"
)

// Ready returns an [*Error] if the unit cannot be checked: two files for one
// role, a both beside a before or after, or neither a before and an after nor a
// both. The hint says what to do.
func (u *Unit) Ready() error {
	err := u.fault
	switch {
	case err != nil:
	case u.Files[Both] != "":
		err = u.bothAlone()
	default:
		err = u.missing()
	}
	if err == nil {
		return nil
	}
	err.Serial = u.Serial
	return err
}

// bothAlone returns an error if a before or after stands beside the both: nobody
// knows which is meant.
func (u *Unit) bothAlone() *Error {
	for _, role := range []string{Before, After} {
		if path := u.Files[role]; path != "" {
			return &Error{File: u.Files[Both], Text: "stands in place of before and after, but " + filepath.Base(path) + " is there too",
				Hint: "keep the one or the other"}
		}
	}
	return nil
}

// missing returns an error if before or after is not there.
func (u *Unit) missing() *Error {
	var roles, names []string
	for _, role := range []string{Before, After} {
		if u.Files[role] == "" {
			roles, names = append(roles, role), append(names, u.nameOf(role))
		}
	}
	if len(roles) == 0 {
		return nil
	}
	if u.Folder == "" {
		return &Error{Text: "no take is named for " + strings.Join(roles, " and "), Hint: u.mend(roles)}
	}
	looked := u.looked
	if roles[0] == After {
		looked = looked[:1] // after does not come from above
	}
	is := " is"
	if len(names) > 1 {
		is = " are"
	}
	return &Error{File: u.Folder, Hint: u.mend(roles),
		Text: strings.Join(names, " and ") + is + " missing; looked in " + strings.Join(looked, " and ")}
}

// nameOf returns the file name that a role's take should have.
func (u *Unit) nameOf(role string) string { return u.prefix + role + ".wav" }

// mend says what to do about missing takes: what is there in their place comes
// first.
func (u *Unit) mend(roles []string) string {
	for _, role := range append(roles, Both) {
		if hint := u.instead[role]; hint != "" {
			return hint
		}
	}
	layout := NoLayout
	if u.Folder != "" && u.prefix == "" {
		layout, _ = LayoutOf(u.Folder)
	}
	switch {
	case u.Folder == "":
		return "name the take straight through with --before and the one through the pad with --after"
	case layout == FlatLot || layout == FolderLot:
		return "this folder holds a lot of units; check them one by one, by folder or with --before and --after"
	case len(roles) == 2:
		return "record the tone straight through as " + u.nameOf(Before) + " and through the pad as " + u.nameOf(After) +
			", or both at once as " + u.nameOf(Both)
	case roles[0] == After:
		return "record the tone through the pad and save it as " + u.nameOf(After)
	case u.prefix != "":
		return "record the tone straight through and save it as " + u.nameOf(Before) + ", or as before.wav for all units"
	}
	return "record the tone straight through and save it as before.wav, here or for all units one folder up"
}
