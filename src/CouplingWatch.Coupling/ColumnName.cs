namespace CouplingWatch.Coupling;

/// <summary>Birth of a secant column: the step, the earlier of the two iterations it was formed from, and the attempt at the step.</summary>
public readonly record struct ColumnName(int Step, int Iteration, int Attempt = 0);
