//! Paths inside a project.

/// Why a path can't be used.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) enum BadPath {
    /// It leaves the project; why, as the end of a sentence.
    Outside(&'static str),
    /// It can't be a path at all; why, as the end of a sentence.
    Malformed(&'static str),
}

/// The path, relative to the root, that `written` means in the file `from`.
pub(super) fn join(from: &str, written: &str) -> Result<String, BadPath> {
    if written.is_empty() {
        return Err(BadPath::Malformed("is empty"));
    }
    if written.contains('\\') {
        return Err(BadPath::Malformed("must be written with `/`"));
    }
    if written.contains('\0') {
        return Err(BadPath::Malformed("holds a NUL character"));
    }
    let drive = written.as_bytes().get(1) == Some(&b':') && written.as_bytes()[0].is_ascii_alphabetic();
    if written.starts_with('/') || drive {
        return Err(BadPath::Outside("is not relative to this file"));
    }
    let folder = from.rsplit_once('/').map_or("", |(folder, _)| folder);
    let mut parts: Vec<&str> = folder.split('/').filter(|part| !part.is_empty()).collect();
    for part in written.split('/') {
        match part {
            "" | "." => {}
            ".." => {
                if parts.pop().is_none() {
                    return Err(BadPath::Outside("leads above the project's root"));
                }
            }
            name => parts.push(name),
        }
    }
    if parts.is_empty() {
        return Err(BadPath::Malformed("names a folder, not a file"));
    }
    Ok(parts.join("/"))
}

/// How the file `from` writes the path of `to`, both relative to the root.
pub(super) fn relative(from: &str, to: &str) -> String {
    let from: Vec<&str> = from.split('/').collect();
    let to: Vec<&str> = to.split('/').collect();
    let folders = from.len() - 1;
    let shared = (0..folders.min(to.len() - 1)).take_while(|at| from[*at] == to[*at]).count();
    let mut parts = vec![".."; folders - shared];
    parts.extend(&to[shared..]);
    parts.join("/")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn paths_stay_inside() {
        assert_eq!(join("recipes/a.coat", "../materials/house.coat"), Ok("materials/house.coat".into()));
        assert_eq!(join("a.coat", "./b.coat"), Ok("b.coat".into()));
        assert!(matches!(join("a.coat", "../b.coat"), Err(BadPath::Outside(_))));
        assert!(matches!(join("r/a.coat", "../../b.coat"), Err(BadPath::Outside(_))));
        assert!(matches!(join("a.coat", "/etc/passwd"), Err(BadPath::Outside(_))));
        assert!(matches!(join("a.coat", "C:/x"), Err(BadPath::Outside(_))));
        assert!(matches!(join("a.coat", "x\\y"), Err(BadPath::Malformed(_))));
        assert_eq!(relative("recipes/a.coat", "materials/house.coat"), "../materials/house.coat");
        assert_eq!(relative("a.coat", "b.coat"), "b.coat");
        assert_eq!(relative("x/a.coat", "x/b.coat"), "b.coat");
        assert!(matches!(join("a.coat", "."), Err(BadPath::Malformed(_))));
    }
}
