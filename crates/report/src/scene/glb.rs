//! Collecting meshes into one buffer and writing the container.

use super::SceneError;
use super::gltf::{
    Accessor, Attributes, Buffer, BufferView, FLOAT, INDICES, Material, Mesh, Node, Primitive,
    Root, Scene, UNSIGNED, VERTICES,
};

const MAGIC: u32 = 0x4654_6C67;
const JSON_CHUNK: u32 = 0x4E4F_534A;
const BINARY_CHUNK: u32 = 0x004E_4942;

/// A description and the buffer that it points into.
pub(crate) struct Builder {
    root: Root,
    buffer: Vec<u8>,
}

impl Builder {
    pub(crate) fn new(root: Root) -> Self {
        Self {
            root,
            buffer: Vec::new(),
        }
    }

    pub(crate) fn material(&mut self, material: Material) -> usize {
        self.root.materials.push(material);
        self.root.materials.len() - 1
    }

    pub(crate) fn node(&mut self, node: Node) -> usize {
        self.root.nodes.push(node);
        self.root.nodes.len() - 1
    }

    /// A mesh of one material.
    pub(crate) fn mesh(
        &mut self,
        name: &str,
        vertices: &[[f64; 3]],
        normals: &[[f64; 3]],
        triangles: &[[u32; 3]],
        material: usize,
    ) -> usize {
        let position = self.vectors(vertices, true);
        let normal = self.vectors(normals, false);
        let view = self.view(
            triangles.iter().flatten().map(|index| index.to_le_bytes()),
            INDICES,
        );
        let indices = self.accessor(Accessor {
            buffer_view: view,
            component_type: UNSIGNED,
            count: 3 * triangles.len(),
            kind: "SCALAR",
            min: None,
            max: None,
        });
        self.root.meshes.push(Mesh {
            name: name.to_owned(),
            primitives: [Primitive {
                attributes: Attributes { position, normal },
                indices,
                material,
            }],
        });
        self.root.meshes.len() - 1
    }

    fn vectors(&mut self, vectors: &[[f64; 3]], bounds: bool) -> usize {
        let rounded: Vec<[f32; 3]> = vectors
            .iter()
            // −0.0 + 0.0 is 0.0: equal results are equal bytes.
            .map(|vector| vector.map(|c| c as f32 + 0.0))
            .collect();
        let view = self.view(rounded.iter().flatten().map(|c| c.to_le_bytes()), VERTICES);
        let fold = |start: f32, pick: fn(f32, f32) -> f32| {
            rounded.iter().fold([start; 3], |found, vector| {
                core::array::from_fn(|k| pick(found[k], vector[k]))
            })
        };
        self.accessor(Accessor {
            buffer_view: view,
            component_type: FLOAT,
            count: rounded.len(),
            kind: "VEC3",
            min: bounds.then(|| fold(f32::INFINITY, f32::min)),
            max: bounds.then(|| fold(f32::NEG_INFINITY, f32::max)),
        })
    }

    fn view(&mut self, words: impl Iterator<Item = [u8; 4]>, target: u32) -> usize {
        let byte_offset = self.buffer.len();
        self.buffer.extend(words.flatten());
        self.root.buffer_views.push(BufferView {
            buffer: 0,
            byte_offset,
            byte_length: self.buffer.len() - byte_offset,
            target,
        });
        self.root.buffer_views.len() - 1
    }

    fn accessor(&mut self, accessor: Accessor) -> usize {
        self.root.accessors.push(accessor);
        self.root.accessors.len() - 1
    }

    /// The file, with one node at the top.
    pub(crate) fn finish(mut self, root: usize) -> Result<Vec<u8>, SceneError> {
        self.root.scenes.push(Scene { nodes: vec![root] });
        self.root.buffers.push(Buffer {
            byte_length: self.buffer.len(),
        });
        let mut json =
            serde_json::to_vec(&self.root).map_err(|error| SceneError::Data(error.to_string()))?;
        // Chunks are whole words: the text ends in blanks; the buffer holds words only.
        while json.len() % 4 != 0 {
            json.push(b' ');
        }
        let bytes = 12 + 8 + json.len() as u64 + 8 + self.buffer.len() as u64;
        let total = u32::try_from(bytes).map_err(|_| SceneError::TooLarge { bytes })?;
        let mut file = Vec::with_capacity(total as usize);
        for word in [MAGIC, 2, total, json.len() as u32, JSON_CHUNK] {
            file.extend(word.to_le_bytes());
        }
        file.extend(json);
        for word in [self.buffer.len() as u32, BINARY_CHUNK] {
            file.extend(word.to_le_bytes());
        }
        file.extend(self.buffer);
        Ok(file)
    }
}
