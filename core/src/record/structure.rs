//! The signature field's place in a tagged file: a Form element that refers to the widget.

use super::{pdf, sign::SignError, update::Revision};
use lopdf::{Dictionary, Object, ObjectId, dictionary};

/// Adds a Form element for `widget` and returns the widget's key in the parent tree; `None` in an untagged file.
///
/// # Source
/// ISO 32000-1:2008, 14.7.4.3 (object references) and 14.7.4.4 (parent tree); ISO 14289-1, 7.18.4 (widgets stand in
/// Form elements).
pub(super) fn add_form_element(
    revision: &mut Revision<'_>,
    page: ObjectId,
    widget: ObjectId,
    title: &Object,
) -> Result<Option<i64>, SignError> {
    let (_, catalog) = revision.catalog()?;
    if !catalog.has(b"StructTreeRoot") {
        return Ok(None);
    }
    let unexpected = || SignError::Structure { part: "tag tree" };
    let document = revision.document();
    let root_id = catalog.get(b"StructTreeRoot").and_then(Object::as_reference).map_err(|_| unexpected())?;
    let mut root = document.get_dictionary(root_id).map_err(|_| unexpected())?.clone();
    // One child may stand without an array around it.
    let mut children = match (pdf::entry(document, &root, b"K"), root.get(b"K")) {
        (Some(Object::Array(children)), _) => children.clone(),
        (_, Ok(only)) => vec![only.clone()],
        _ => Vec::new(),
    };

    let element = revision.new_id();
    let reference = dictionary! { "Type" => "OBJR", "Pg" => page, "Obj" => widget };
    revision.put(
        element,
        dictionary! {
            "Type" => "StructElem",
            "S" => "Form",
            "P" => root_id,
            "Pg" => page,
            "Alt" => title.clone(),
            "K" => reference,
        },
    );
    children.push(element.into());
    root.set("K", children);
    let key = add_parent(revision, &mut root, element).ok_or_else(unexpected)?;
    revision.put(root_id, root);
    Ok(Some(key))
}

/// Enters `element` in the parent tree under the next free key. The tree must be a flat one.
fn add_parent(revision: &mut Revision<'_>, root: &mut Dictionary, element: ObjectId) -> Option<i64> {
    let document = revision.document();
    let mut tree = match root.get(b"ParentTree") {
        Ok(_) => pdf::dictionary(document, root, b"ParentTree")?.clone(),
        Err(_) => Dictionary::new(),
    };
    if tree.has(b"Kids") {
        return None;
    }
    let mut pairs = pdf::array(document, &tree, b"Nums").to_vec();
    let used = pairs.iter().step_by(2).map(Object::as_i64).collect::<Result<Vec<_>, _>>().ok()?;
    let stated = root.get(b"ParentTreeNextKey").and_then(Object::as_i64).unwrap_or(0);
    let key = used.into_iter().map(|k| k.saturating_add(1)).fold(stated.max(0), i64::max);
    pairs.push(key.into());
    pairs.push(element.into());
    tree.set("Nums", pairs);
    match root.get(b"ParentTree").and_then(Object::as_reference) {
        Ok(id) => revision.put(id, tree),
        Err(_) => root.set("ParentTree", tree),
    }
    root.set("ParentTreeNextKey", key.checked_add(1)?);
    Some(key)
}
