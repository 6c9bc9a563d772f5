package unit

import "path/filepath"

// RigSheet finds the sheet of the bench that serves a folder: its own rig.toml,
// else the nearest of up to two folders above. It is an error, an [*Error], if
// there is none, or two in one folder.
func RigSheet(folder string) (string, error) {
	folder = filepath.Clean(folder)
	for at, up := folder, 0; at != "" && up <= 2; at, up = parent(at), up+1 {
		s, err := look(at)
		if err != nil {
			if up == 0 {
				return "", err
			}
			break
		}
		switch names := s.sheets[rigSheet]; len(names) {
		case 0:
		case 1:
			return s.path(names[0]), nil
		default:
			return "", &Error{File: s.path(names[1]), Text: "and " + names[0] + " are two files for one sheet", Hint: "keep one of them here"}
		}
	}
	return "", &Error{File: folder, Text: "there is no rig.toml here or above", Hint: "name the bench's sheet with --rig"}
}
