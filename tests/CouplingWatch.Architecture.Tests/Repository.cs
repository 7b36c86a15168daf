using System.Xml.Linq;

namespace CouplingWatch.Architecture.Tests;

/// <summary>The checkout the tests were built from, found by walking up to the solution file.</summary>
internal static class Repository
{
    private static readonly string[] Built = ["bin", "obj", "node_modules"];

    public static string Root { get; } = FindRoot();

    public static string PathTo(string relative) => Path.Combine(Root, relative.Replace('/', Path.DirectorySeparatorChar));

    /// <summary>Source files below <paramref name="folders"/> with one of the given endings; built output left out.</summary>
    public static IEnumerable<string> Files(string[] folders, params string[] endings) =>
        folders.Select(PathTo).Where(Directory.Exists)
            .SelectMany(f => Directory.EnumerateFiles(f, "*", SearchOption.AllDirectories))
            .Where(f => endings.Any(e => f.EndsWith(e, StringComparison.Ordinal)))
            .Where(f => !Relative(f).Split('/').Any(Built.Contains));

    public static string Relative(string path) => Path.GetRelativePath(Root, path).Replace(Path.DirectorySeparatorChar, '/');

    public static IReadOnlyList<Project> Projects { get; } =
        [.. Files(["src", "samples", "tests"], ".csproj").Order(StringComparer.Ordinal).Select(Project.Read)];

    private static string FindRoot()
    {
        for (var at = new DirectoryInfo(AppContext.BaseDirectory); at is not null; at = at.Parent)
        {
            if (File.Exists(Path.Combine(at.FullName, "CouplingWatch.sln"))) return at.FullName;
        }
        throw new InvalidOperationException($"No CouplingWatch.sln above {AppContext.BaseDirectory}.");
    }
}

internal sealed record Project(string Name, string Folder, IReadOnlyList<string> References, IReadOnlyList<string> Packages)
{
    public static Project Read(string file)
    {
        var xml = XDocument.Load(file);
        string[] Includes(string element) => [.. xml.Descendants(element).Select(e => (string?)e.Attribute("Include") ?? "")];
        return new Project(
            Path.GetFileNameWithoutExtension(file),
            Repository.Relative(Path.GetDirectoryName(file)!),
            [.. Includes("ProjectReference").Select(r => Path.GetFileNameWithoutExtension(r.Replace('\\', '/')))],
            Includes("PackageReference"));
    }
}
