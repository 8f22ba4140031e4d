//! The parts of a glTF 2.0 description that the scenes use (ISO/IEC 12113:2022).

use serde::Serialize;
use serde_json::Value;

/// `componentType` of 32-bit floats and of unsigned whole numbers.
pub(crate) const FLOAT: u32 = 5126;
pub(crate) const UNSIGNED: u32 = 5125;
/// `target` of vertex data and of indices.
pub(crate) const VERTICES: u32 = 34962;
pub(crate) const INDICES: u32 = 34963;

#[derive(Debug, Serialize)]
#[serde(rename_all = "camelCase")]
pub(crate) struct Root {
    asset: Asset,
    scene: usize,
    pub(crate) scenes: Vec<Scene>,
    pub(crate) nodes: Vec<Node>,
    pub(crate) meshes: Vec<Mesh>,
    pub(crate) materials: Vec<Material>,
    pub(crate) accessors: Vec<Accessor>,
    pub(crate) buffer_views: Vec<BufferView>,
    pub(crate) buffers: Vec<Buffer>,
}

#[derive(Debug, Serialize)]
struct Asset {
    version: &'static str,
    generator: String,
    extras: Value,
}

#[derive(Debug, Serialize)]
pub(crate) struct Scene {
    pub(crate) nodes: Vec<usize>,
}

#[derive(Debug, Default, Serialize)]
pub(crate) struct Node {
    pub(crate) name: String,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub(crate) mesh: Option<usize>,
    /// Column by column.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub(crate) matrix: Option<[f64; 16]>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub(crate) translation: Option<[f64; 3]>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub(crate) scale: Option<[f64; 3]>,
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub(crate) children: Vec<usize>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub(crate) extras: Option<Value>,
}

#[derive(Debug, Serialize)]
pub(crate) struct Mesh {
    pub(crate) name: String,
    pub(crate) primitives: [Primitive; 1],
}

#[derive(Debug, Serialize)]
pub(crate) struct Primitive {
    pub(crate) attributes: Attributes,
    pub(crate) indices: usize,
    pub(crate) material: usize,
}

#[derive(Debug, Serialize)]
#[serde(rename_all = "UPPERCASE")]
pub(crate) struct Attributes {
    pub(crate) position: usize,
    pub(crate) normal: usize,
}

#[derive(Debug, Serialize)]
#[serde(rename_all = "camelCase")]
pub(crate) struct Material {
    name: String,
    pbr_metallic_roughness: Surface,
    #[serde(skip_serializing_if = "Option::is_none")]
    alpha_mode: Option<&'static str>,
}

#[derive(Debug, Serialize)]
#[serde(rename_all = "camelCase")]
struct Surface {
    base_color_factor: [f64; 4],
    metallic_factor: f64,
    roughness_factor: f64,
}

#[derive(Debug, Serialize)]
#[serde(rename_all = "camelCase")]
pub(crate) struct Accessor {
    pub(crate) buffer_view: usize,
    pub(crate) component_type: u32,
    pub(crate) count: usize,
    #[serde(rename = "type")]
    pub(crate) kind: &'static str,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub(crate) min: Option<[f32; 3]>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub(crate) max: Option<[f32; 3]>,
}

#[derive(Debug, Serialize)]
#[serde(rename_all = "camelCase")]
pub(crate) struct BufferView {
    pub(crate) buffer: usize,
    pub(crate) byte_offset: usize,
    pub(crate) byte_length: usize,
    pub(crate) target: u32,
}

#[derive(Debug, Serialize)]
#[serde(rename_all = "camelCase")]
pub(crate) struct Buffer {
    pub(crate) byte_length: usize,
}

impl Root {
    /// An empty scene by this program, with what its numbers mean.
    pub(crate) fn new(generator: String, extras: Value) -> Self {
        Self {
            asset: Asset {
                version: "2.0",
                generator,
                extras,
            },
            scene: 0,
            scenes: Vec::new(),
            nodes: Vec::new(),
            meshes: Vec::new(),
            materials: Vec::new(),
            accessors: Vec::new(),
            buffer_views: Vec::new(),
            buffers: Vec::new(),
        }
    }
}

impl Node {
    /// A node that shows a mesh where it lies.
    pub(crate) fn of_mesh(name: &str, mesh: usize) -> Self {
        Self {
            name: name.to_owned(),
            mesh: Some(mesh),
            ..Self::default()
        }
    }
}

impl Material {
    /// A dull surface of a colour (linear red, green, blue; opacity).
    pub(crate) fn new(name: &str, colour: [f64; 4]) -> Self {
        Self {
            name: name.to_owned(),
            pbr_metallic_roughness: Surface {
                base_color_factor: colour,
                metallic_factor: 0.0,
                roughness_factor: 0.55,
            },
            alpha_mode: (colour[3] < 1.0).then_some("BLEND"),
        }
    }
}
