printf 'job: file-too-large\nset: {maker: x}\nplan: |\n'
yes '  The same line once more.' | head -n 200000
