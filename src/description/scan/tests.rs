use super::*;

/// Every kind of text that the pass refuses, with the bytes it marks.
#[test]
fn refusals_mark_their_place() {
    let refused = |text: &str| {
        let problems = scan(text).err().unwrap_or_default();
        let last = problems
            .iter()
            .last()
            .map(|p| (p.part.clone(), p.kind.to_string()));
        match last {
            Some((crate::problem::Part::Bytes(bytes), says)) => (text[bytes].to_owned(), says),
            other => panic!("{text:?}: {other:?}"),
        }
    };
    let is =
        |text: &str, mark: &str, says: &str| assert_eq!(refused(text), (mark.into(), says.into()));
    is("", "", "the file is empty");
    is("# only a remark\n", "", "the file is empty");
    is(
        "a: 1\n---\nb: 2\n",
        "---",
        "a second document in the same file",
    );
    is(
        "a: &q {b: 1}\nc:\n  <<: *q\n",
        "<<",
        "merge key `<<` is not understood",
    );
    is(
        "? [a, b]\n: 1\n",
        "[",
        "a key must be a single word or text",
    );
    is(
        "a: &a [*a]\n",
        "*a",
        "an alias inside the value that it stands for",
    );
    is("a:\n\t- b\n", "\t", "tab used for indentation");
    is("é: 1\nb:\n\t- c\n", "\t", "tab used for indentation");
}
