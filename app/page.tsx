export default function HomePage() {
  return <main>Tidemark</main>;
}
