/** Unicode characters of mathematics as the LaTeX commands they stand for. Source: Unicode code charts (Greek, Mathematical Operators, Superscripts and Subscripts). */

const GREEK_LOWER = 'alpha beta gamma delta epsilon zeta eta theta iota kappa lambda mu nu xi omicron pi rho varsigma sigma tau upsilon phi chi psi omega'.split(' ');
const GREEK_UPPER: Readonly<Record<string, string>> = { Γ: 'Gamma', Δ: 'Delta', Θ: 'Theta', Λ: 'Lambda', Ξ: 'Xi', Π: 'Pi', Σ: 'Sigma', Υ: 'Upsilon', Φ: 'Phi', Ψ: 'Psi', Ω: 'Omega' };

const commands: Record<string, string> = { ...GREEK_UPPER, ϵ: 'epsilon', ϑ: 'vartheta', ϕ: 'phi', φ: 'varphi', ϖ: 'varpi', ϱ: 'varrho', µ: 'mu', ℏ: 'hbar', ħ: 'hbar', ℓ: 'ell', '∞': 'infty', '√': 'sqrt', '∂': 'partial', '∫': 'int', '∑': 'sum', '∏': 'prod', '∇': 'nabla', '…': 'dots', '⋯': 'cdots', '·': 'cdot', '⋅': 'cdot', '×': 'times', '∗': 'ast', '÷': 'div', '±': 'pm', '∓': 'mp', '≈': 'approx', '≃': 'simeq', '≅': 'cong', '∼': 'sim', '≤': 'leq', '⩽': 'leq', '≥': 'geq', '⩾': 'geq', '≠': 'neq', '≡': 'equiv', '≔': 'coloneqq', '∝': 'propto', '≪': 'll', '≫': 'gg', '→': 'to', '⟶': 'to', '⇒': 'implies', '⟹': 'implies', '⇔': 'iff', '∈': 'in', '⟨': 'langle', '⟩': 'rangle', '∣': 'mid', '‖': 'Vert', '𝒪': 'bigO' };
GREEK_LOWER.forEach((name, index) => {
  const character = String.fromCharCode(0x3b1 + index);
  if (character !== 'φ') commands[character] = name;
});

/** Character -> command name without backslash. `φ` is `\varphi` and `ϕ` is `\phi`, as typeset. */
export const UNICODE_COMMANDS: Readonly<Record<string, string>> = commands;

export const SUPERSCRIPTS: Readonly<Record<string, string>> = { '⁰': '0', '¹': '1', '²': '2', '³': '3', '⁴': '4', '⁵': '5', '⁶': '6', '⁷': '7', '⁸': '8', '⁹': '9', '⁺': '+', '⁻': '-', '⁼': '=', '⁽': '(', '⁾': ')', ⁿ: 'n', ⁱ: 'i', ᵃ: 'a', ᵇ: 'b', ᶜ: 'c', ᵈ: 'd', ᵉ: 'e', ᵏ: 'k', ᵐ: 'm', ᵖ: 'p', ᵗ: 't', ˣ: 'x', ʸ: 'y', '\u2044': '/', ᐟ: '/' };
export const SUBSCRIPTS: Readonly<Record<string, string>> = { '₀': '0', '₁': '1', '₂': '2', '₃': '3', '₄': '4', '₅': '5', '₆': '6', '₇': '7', '₈': '8', '₉': '9', '₊': '+', '₋': '-', ₐ: 'a', ₑ: 'e', ₕ: 'h', ᵢ: 'i', ⱼ: 'j', ₖ: 'k', ₗ: 'l', ₘ: 'm', ₙ: 'n', ₒ: 'o', ₚ: 'p', ᵣ: 'r', ₛ: 's', ₜ: 't', ᵤ: 'u', ᵥ: 'v', ₓ: 'x' };
export const FRACTIONS: Readonly<Record<string, readonly [number, number]>> = { '½': [1, 2], '⅓': [1, 3], '⅔': [2, 3], '¼': [1, 4], '¾': [3, 4], '⅕': [1, 5], '⅖': [2, 5], '⅗': [3, 5], '⅘': [4, 5], '⅙': [1, 6], '⅚': [5, 6], '⅐': [1, 7], '⅛': [1, 8], '⅜': [3, 8], '⅝': [5, 8], '⅞': [7, 8], '⅑': [1, 9], '⅒': [1, 10] };

/** Greek letter commands, and plain words for them. */
export const GREEK: ReadonlySet<string> = new Set([...GREEK_LOWER, ...Object.values(GREEK_UPPER), 'varepsilon', 'vartheta', 'varphi', 'varpi', 'varrho', 'varsigma', 'varkappa', 'digamma', 'varGamma', 'varDelta', 'varOmega']);
