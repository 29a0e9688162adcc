//! Who draws the window: what was asked for, what is in use, and why.

use std::fmt;

/// Which renderer the user asks for.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, clap::ValueEnum)]
pub enum RendererChoice {
    /// OpenGL where a graphics card provides it, else the processor.
    #[default]
    Auto,
    /// OpenGL, even where the processor computes it.
    Gl,
    /// The processor.
    Cpu,
}

/// Who draws the window.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Renderer {
    /// OpenGL.
    Gl,
    /// The painter of this program, on the processor.
    Cpu,
}

/// Why this renderer is in use.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum RendererReason {
    /// The user asked for it.
    AskedFor,
    /// OpenGL works; its driver gives this name, if it gave one.
    GraphicsCard(Option<String>),
    /// OpenGL is there, but computed by the processor; its driver gives this name.
    SoftwareGl(String),
    /// OpenGL could not be started, for this reason, if one is known.
    NoGl(Option<String>),
}

/// The renderer in use and why; its text is one line for the user.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct RendererReport {
    /// Who draws the window.
    pub renderer: Renderer,
    /// Why.
    pub reason: RendererReason,
}

impl fmt::Display for RendererReport {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self.renderer {
            Renderer::Gl => "Drawn with OpenGL",
            Renderer::Cpu => "Drawn by the processor",
        })?;
        match &self.reason {
            RendererReason::AskedFor => f.write_str(", as asked for"),
            RendererReason::GraphicsCard(Some(name)) => write!(f, " on {name}"),
            RendererReason::GraphicsCard(None) => Ok(()),
            RendererReason::SoftwareGl(name) => {
                write!(f, ": OpenGL here is {name}, without a graphics card")
            }
            RendererReason::NoGl(Some(cause)) => {
                write!(f, ": OpenGL could not be started ({cause})")
            }
            RendererReason::NoGl(None) => f.write_str(": OpenGL could not be started"),
        }
    }
}

/// Names, in lower case, that OpenGL drivers without a graphics card give themselves in
/// `GL_RENDERER`: Mesa's llvmpipe, softpipe and older rasterizers, Google's SwiftShader, the
/// OpenGL 1.1 of Windows, and Microsoft's WARP behind Direct3D.
const SOFTWARE_DRIVERS: [&str; 8] = [
    "llvmpipe",
    "softpipe",
    "swrast",
    "software rasterizer",
    "swiftshader",
    "gdi generic",
    "basic render driver",
    "lavapipe",
];

/// Whether an OpenGL driver of this name computes its pictures on the processor.
pub(super) fn is_software(driver: &str) -> bool {
    let driver = driver.to_lowercase();
    SOFTWARE_DRIVERS.iter().any(|name| driver.contains(name))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn software_drivers_are_told_from_graphics_cards() {
        // Texts as Mesa, ANGLE and Windows report them; the versions are examples.
        for software in [
            "llvmpipe (LLVM 15.0.6, 256 bits)",
            "softpipe",
            "Software Rasterizer",
            "Google SwiftShader",
            "ANGLE (Google, Vulkan 1.3.0 (SwiftShader Device (Subzero)), SwiftShader driver)",
            "GDI Generic",
            "D3D12 (Microsoft Basic Render Driver)",
            "virgl (LLVMPIPE (LLVM 15.0.6, 256 bits))",
            "zink Vulkan 1.3(llvmpipe (LLVM 15.0.6, 256 bits) (MESA_LLVMPIPE))",
        ] {
            assert!(is_software(software), "{software}");
        }
        for card in [
            "Mesa Intel(R) UHD Graphics 620 (KBL GT2)",
            "AMD Radeon RX 6600 (radeonsi, navi23, LLVM 15.0.6, DRM 3.49)",
            "NVIDIA GeForce GTX 1650/PCIe/SSE2",
            "Apple M1",
            "V3D 4.2",
        ] {
            assert!(!is_software(card), "{card}");
        }
    }

    #[test]
    fn a_report_is_one_line() {
        let report = |renderer, reason| RendererReport { renderer, reason }.to_string();
        assert_eq!(
            report(Renderer::Cpu, RendererReason::SoftwareGl("llvmpipe".into())),
            "Drawn by the processor: OpenGL here is llvmpipe, without a graphics card"
        );
        assert_eq!(
            report(Renderer::Cpu, RendererReason::NoGl(None)),
            "Drawn by the processor: OpenGL could not be started"
        );
        assert_eq!(
            report(Renderer::Gl, RendererReason::GraphicsCard(Some("V3D 4.2".into()))),
            "Drawn with OpenGL on V3D 4.2"
        );
        assert_eq!(report(Renderer::Cpu, RendererReason::AskedFor), "Drawn by the processor, as asked for");
    }
}
