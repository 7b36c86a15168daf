namespace CouplingWatch.Components.RunPage;

/// <summary>What a panel shows, by which formula, from which source.</summary>
public sealed record Help(string Panel, string Shows, string Formula, string Source)
{
    public static Help Path { get; } = new("Residual path",
        "The residual of each field in the step in progress, over the 10–90 % band of earlier steps. The cone says when the target is expected, from the third residual on.",
        "y = log₁₀(‖r‖ ÷ target). Rate: the median of all slopes between two of the last six residuals. Forecast: what earlier steps still had to do from the same height; without five of them, y ÷ rate.",
        "Slope: “Estimates of the regression coefficient based on Kendall’s tau”, J. Amer. Statist. Assoc. 63 (1968) 1379–1389, DOI 10.1080/01621459.1968.10480934. Band and forecast: this program’s own rule.");

    public static Help Ledger { get; } = new("Secant ledger",
        "Every secant column of the basis, newest first: which step and iteration it was born in, how much new direction it brings, and whether the filter keeps it.",
        "V = QR over the columns, newest first. own-norm leaves out a column with |Rᵢᵢ| < ε ‖vᵢ‖, pivot-ratio one with |Rᵢᵢ| < ε · max |Rⱼⱼ|; the newest offender goes first, then it is factored again. κ = σ₁ ÷ σₙ of R.",
        "“Performance of a new partitioned procedure versus a monolithic procedure in fluid–structure interaction”, Computers & Structures 87 (2009) 793–801, DOI 10.1016/j.compstruc.2008.11.013; “Improving the performance of the partitioned QN-ILS procedure for fluid–structure interaction problems: Filtering”, Computers & Structures 171 (2016) 9–17, DOI 10.1016/j.compstruc.2016.04.001.");

    public static Help Split { get; } = new("What carries the residual",
        "Of each pass, the share of its residual that lies in the columns of this step, in those of earlier steps, in the surrogate’s, and in nothing; and whether the linear model foretold the next residual.",
        "Shares of ‖r‖² by projection on Q in that order. Left over ≤ c = ‖r − QQᵀr‖ ÷ ‖r‖; came = ‖rₖ₊₁‖ ÷ ‖rₖ‖. Broken: c < 0.3 and came > 0.7.",
        "The split follows “Surrogate-based acceleration of quasi-Newton techniques for fluid–structure interaction simulations”, Computers & Structures 260 (2022) 106720, DOI 10.1016/j.compstruc.2021.106720. The promise: this program’s own rule.");

    public static Help Spectrum { get; } = new("What a pass does",
        "How one pass of all solvers stretches each direction seen so far: a Ritz value λ inside the green disc shrinks under relaxation alone, one outside grows.",
        "Eigenvalues of UᵀWZS⁻¹ from D = USZᵀ, kept σ > 10⁻⁴ σ₁. Tamed: |1 − ω(1 − λ)| < 1. Largest ω = 2 ÷ (1 − λ_min), best ω = 2 ÷ (2 − λ_min − λ_max).",
        "“Added-mass effect in the design of partitioned algorithms for fluid–structure problems”, Comput. Methods Appl. Mech. Engrg. 194 (2005) 4506–4527, DOI 10.1016/j.cma.2004.12.005.");

    public static Help Cost { get; } = new("What it costs",
        "Seconds of a pass by solver, node-hours spent, lost and to go, and when the run ends against its allocation.",
        "Node-hours = nodes × wall seconds ÷ 3600. Lost: rejected, redone and capped steps, and passes below the noise. End: steps left × the pace of the latest steps, with its 10–90 % band.",
        "Common practice, no source.");

    public static Help Settings { get; } = new("Settings",
        "The settings in force, and a form for what the run declared adjustable. A revision is published, read by the run between two steps and applied from the next one.",
        "Effect: mean iterations a step before and after. One changes settings when things are bad, and bad stretches end by themselves, so a plain before/after flatters the change.",
        "Common practice, no source.");
}
