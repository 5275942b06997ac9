//! The boundary, nothing else: text goes in, data comes out. Types for the page's JavaScript are made from the structs.

use farstaff::question::{Answer, Catalogue};
use form_urlencoded::Serializer;
use js_sys::{Array, Object};
use tsify::{Ts, Tsify};
use wasm_bindgen::prelude::*;

/// Every question, its fields and their units.
#[wasm_bindgen]
pub fn catalogue() -> Result<Ts<Catalogue>, JsError> {
    Ok(farstaff::question::catalogue().into_ts()?)
}

/// Answers question `id`. Whatever was typed, an answer comes back; only an unknown `id` throws.
#[wasm_bindgen]
pub fn ask(
    id: &str,
    #[wasm_bindgen(unchecked_param_type = "string | Record<string, string>")] entry: &JsValue,
) -> Result<Ts<Answer>, JsError> {
    let text = entry.as_string().unwrap_or_else(|| pairs(entry));
    let answer = farstaff::question::ask(id, &text).ok_or_else(|| JsError::new(&format!("no question named {id}")))?;
    Ok(answer.into_ts()?)
}

/// An object of strings as an HTML form would submit it. What is not text is no entry and is left out.
fn pairs(entry: &JsValue) -> String {
    let mut form = Serializer::new(String::new());
    let Some(object) = entry.dyn_ref::<Object>() else { return String::new() };
    for pair in Object::entries(object).iter() {
        let pair = Array::from(&pair);
        if let (Some(name), Some(text)) = (pair.get(0).as_string(), pair.get(1).as_string()) {
            form.append_pair(&name, &text);
        }
    }
    form.finish()
}
