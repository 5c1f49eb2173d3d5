//! What the library's own source says of its public types, to be named where a cell names something else.

use std::collections::BTreeSet;
use std::fs;
use std::path::Path;

use ra_ap_syntax::ast::{self, HasModuleItem, HasName, HasVisibility};
use ra_ap_syntax::{AstNode, Edition, SourceFile};

/// What a cell can do with a type of the library.
#[derive(Debug, Default, PartialEq, Eq)]
pub(crate) struct Facts {
    /// It is a type of the library.
    pub(crate) known: bool,
    /// Its public fields with their types.
    pub(crate) fields: Vec<(String, String)>,
    /// Functions that make one, as a cell calls them: `measured("…")`.
    pub(crate) makers: Vec<String>,
    /// Its own public functions.
    own: BTreeSet<String>,
    /// Its private members, and those of traits.
    other: BTreeSet<String>,
}

impl Facts {
    /// Reads the source of the library in a folder about a type of that name.
    pub(crate) fn of(library: &Path, name: &str) -> Facts {
        let mut facts = Facts::default();
        if !name.is_empty() {
            facts.read_folder(&library.join("src"), name);
        }
        facts
    }

    /// Whether a member is not for cells.
    pub(crate) fn hides(&self, member: &str) -> bool {
        self.other.contains(member) && !self.own.contains(member)
    }

    fn read_folder(&mut self, folder: &Path, name: &str) {
        let mut paths: Vec<_> =
            fs::read_dir(folder).into_iter().flatten().flatten().map(|entry| entry.path()).collect();
        paths.sort();
        for path in paths {
            if path.is_dir() {
                self.read_folder(&path, name);
            } else if path.extension().is_some_and(|kind| kind == "rs") {
                self.read(&fs::read_to_string(path).unwrap_or_default(), name);
            }
        }
    }

    fn read(&mut self, text: &str, name: &str) {
        if !text.contains("pub trait ") && !text.contains(name) {
            return;
        }
        for item in SourceFile::parse(text, Edition::Edition2024).tree().items() {
            match item {
                ast::Item::Struct(item) if is_named(&item, name) => {
                    self.known = true;
                    if let Some(ast::FieldList::RecordFieldList(list)) = item.field_list() {
                        list.fields().for_each(|field| self.field(&field));
                    }
                }
                ast::Item::Enum(item) if is_named(&item, name) => self.known = true,
                ast::Item::Impl(item) if item.self_ty().is_some_and(|kind| last_name(&kind) == name) => {
                    let own = item.trait_().is_none();
                    let members = item.assoc_item_list().into_iter().flat_map(|list| list.assoc_items());
                    members.for_each(|member| self.member(&member, own, name));
                }
                // What a unit is written with is a trait's, and for cells.
                ast::Item::Trait(item) if !is_named(&item, "Units") => {
                    let members = item.assoc_item_list().into_iter().flat_map(|list| list.assoc_items());
                    members.for_each(|member| self.member(&member, false, name));
                }
                _ => {}
            }
        }
    }

    fn field(&mut self, field: &ast::RecordField) {
        let (Some(name), Some(kind)) = (field.name(), field.ty()) else { return };
        let name = name.text().to_string();
        if is_public(field) {
            self.fields.push((name, kind.syntax().text().to_string()));
        } else {
            self.other.insert(name);
        }
    }

    fn member(&mut self, member: &ast::AssocItem, own: bool, of: &str) {
        let (name, public) = match member {
            ast::AssocItem::Fn(function) => (function.name(), is_public(function)),
            ast::AssocItem::Const(constant) => (constant.name(), is_public(constant)),
            _ => return,
        };
        let Some(name) = name.map(|name| name.text().to_string()) else { return };
        if let ast::AssocItem::Fn(function) = member
            && own
            && public
        {
            self.makers.extend(maker(function, &name, of));
        }
        if own && public {
            self.own.insert(name)
        } else {
            self.other.insert(name)
        };
    }
}

/// A function that makes a value of a type, as it is called.
fn maker(function: &ast::Fn, name: &str, of: &str) -> Option<String> {
    let given = function.ret_type()?.ty()?.syntax().text().to_string();
    let inner = given.strip_prefix("Result<").and_then(|rest| rest.strip_suffix('>'));
    let kind = inner.unwrap_or(&given);
    let list = function.param_list()?;
    if list.self_param().is_some() || (kind != "Self" && kind.split('<').next() != Some(of)) {
        return None;
    }
    let arguments: Vec<String> = list.params().map(|argument| argument_words(&argument)).collect();
    Some(format!("{name}({}){}", arguments.join(", "), if inner.is_some() { "?" } else { "" }))
}

/// An argument as it is written: a text in quotes, else its name.
fn argument_words(argument: &ast::Param) -> String {
    let kind = argument.ty().map(|kind| kind.syntax().text().to_string()).unwrap_or_default();
    if kind == "&str" || kind.contains("Into<String>") || kind.contains("AsRef<str>") {
        return "\"…\"".to_owned();
    }
    argument.pat().map(|name| name.syntax().text().to_string()).unwrap_or_default()
}

fn is_named(item: &impl HasName, name: &str) -> bool {
    item.name().is_some_and(|own| own.text() == name)
}

fn is_public(item: &impl HasVisibility) -> bool {
    item.visibility().is_some_and(|visibility| visibility.syntax().text() == "pub")
}

/// `Stress` of `crate::stress::Stress<F>`.
fn last_name(kind: &ast::Type) -> String {
    let text = kind.syntax().text().to_string();
    let path = text.split('<').next().unwrap_or_default().trim();
    path.rsplit("::").next().unwrap_or_default().to_owned()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_type_is_known_by_its_source() {
        let mut facts = Facts::default();
        facts.read(
            "pub struct Source { pub words: String, grade: Grade }\n\
             impl Source {\n\
               pub fn measured(words: impl Into<String>) -> Self { todo!() }\n\
               pub fn read(path: &str, depth: Length) -> Result<Source> { todo!() }\n\
               pub fn in_file(self, path: &str) -> Self { self }\n\
               pub fn text(&self) -> String { todo!() }\n\
               pub(crate) fn of(grade: Grade) -> Self { todo!() }\n\
             }\n\
             impl Show for Source { fn html(&self) -> String { todo!() } }\n\
             impl Other { pub fn no(words: &str) -> Source { todo!() } }",
            "Source",
        );
        facts.read("pub trait Show { fn text(&self) -> String; fn svg(&self) {} }", "Source");
        assert!(facts.known);
        assert_eq!(facts.fields, [("words".to_owned(), "String".to_owned())]);
        assert_eq!(facts.makers, ["measured(\"…\")", "read(\"…\", depth)?"]);
        for (member, hidden) in [
            ("words", false),
            ("in_file", false),
            ("text", false),
            ("grade", true),
            ("of", true),
            ("html", true),
            ("svg", true),
        ] {
            assert_eq!(facts.hides(member), hidden, "{member}");
        }
        assert!(!facts.hides("no"));
    }
}
