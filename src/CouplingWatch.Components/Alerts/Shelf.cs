namespace CouplingWatch.Components.Alerts;

/// <summary>For how long an alert is put aside, and why.</summary>
public sealed record Shelf(int Minutes, string Reason);
